// The typed way to the server: one call a contract, reads cached by its name, writes marking what they touch as stale.
// It never decides; a refusal comes back as ApiProblem with the server's reasons.

import { useInfiniteQuery, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import type { AnswerOf, BodyIn, ContractShape, ParamsIn, QueryIn } from '@/shared/contracts/contract';
import { Problem } from '@/shared/contracts/problem';

export class ApiProblem extends Error {
  constructor(
    readonly problem: Problem,
    /** True when no answer came at all: nothing is known of what the server did. */
    readonly offline: boolean,
  ) {
    super(problem.detail);
    this.name = 'ApiProblem';
  }
}

export interface CallInput<C extends ContractShape> {
  params?: ParamsIn<C>;
  query?: QueryIn<C>;
  body?: BodyIn<C>;
  /** Where the page before ended; goes with the query of a list. */
  cursor?: string | undefined;
  /** Idempotency key; make it once a wish, not once a try. */
  key?: string;
  file?: Blob;
  signal?: AbortSignal;
}

const offlineProblem: Problem = {
  type: 'about:blank',
  title: 'offline',
  status: 0,
  detail: 'offline',
  code: 'offline',
  requestId: '',
};

function addressOf(path: string, params: unknown, query: unknown, cursor: string | undefined): string {
  const filled = path.replace(/:([A-Za-z]+)/g, (_whole, name: string) =>
    encodeURIComponent(String(valueOf(params, name) ?? '')),
  );
  const search = new URLSearchParams();
  if (typeof query === 'object' && query !== null) {
    for (const [name, value] of Object.entries(query))
      if (value !== undefined && value !== null) search.set(name, String(value));
  }
  if (cursor !== undefined) search.set('cursor', cursor);
  const text = search.toString();
  return text ? `${filled}?${text}` : filled;
}

function valueOf(object: unknown, name: string): unknown {
  return typeof object === 'object' && object !== null
    ? Object.getOwnPropertyDescriptor(object, name)?.value
    : undefined;
}

function payloadOf(body: unknown, file: Blob | undefined): { payload?: string | FormData; type?: string } {
  if (file) {
    const form = new FormData();
    if (typeof body === 'object' && body !== null)
      for (const [name, value] of Object.entries(body)) form.set(name, String(value));
    form.set('file', file);
    return { payload: form };
  }
  return body === undefined ? {} : { payload: JSON.stringify(body), type: 'application/json' };
}

/**
 * Calls one door. Throws ApiProblem for every answer that is not the contract's, `offline` when none came.
 */
export async function callDoor<C extends ContractShape>(contract: C, input: CallInput<C> = {}): Promise<AnswerOf<C>> {
  const { payload, type } = payloadOf(input.body, input.file);
  const headers: Record<string, string> = { accept: 'application/json' };
  if (type) headers['content-type'] = type;
  if (input.key) headers['idempotency-key'] = input.key;
  let response: Response;
  try {
    response = await fetch(addressOf(contract.path, input.params, input.query, input.cursor), {
      method: contract.method,
      headers,
      credentials: 'same-origin',
      ...(payload === undefined ? {} : { body: payload }),
      ...(input.signal ? { signal: input.signal } : {}),
    });
  } catch {
    throw new ApiProblem(offlineProblem, true);
  }
  const answer: unknown = await response.json().catch(() => undefined);
  if (!response.ok) {
    const problem = Problem.safeParse(answer);
    const status = response.status;
    throw new ApiProblem(
      problem.success
        ? problem.data
        : { ...offlineProblem, status, title: 'unreadable', detail: 'unreadable', code: 'unreadable' },
      false,
    );
  }
  return readBy<C['answer']>(contract.answer, answer, response.status);
}

/** The contract's schema types the answer: what does not fit is a fault of the server, not something to show half of. */
function readBy<S extends z.ZodType>(schema: S, answer: unknown, status: number): z.output<S> {
  const parsed = schema.safeParse(answer);
  if (parsed.success) return parsed.data;
  throw new ApiProblem(
    { ...offlineProblem, status, title: 'unreadable', detail: 'unreadable', code: 'unreadable' },
    false,
  );
}

/** Key of a read: the noun first, so that a write can mark a whole noun stale. */
export function keyOf(contract: ContractShape, params?: unknown, query?: unknown): readonly unknown[] {
  const noun = contract.name.split('.')[0];
  return [noun, contract.name, params ?? null, query ?? null];
}

export interface ReadInput<C extends ContractShape> {
  params?: ParamsIn<C>;
  query?: QueryIn<C>;
  enabled?: boolean;
  /** Read again after so many milliseconds while the screen is shown. */
  everyMs?: number;
  /** Ask again when the page opens, however new the kept answer is. */
  isFresh?: boolean;
}

/** Reads one door and keeps the answer by its contract's name. */
export function useRead<C extends ContractShape>(contract: C, input: ReadInput<C> = {}) {
  return useQuery<AnswerOf<C>, ApiProblem>({
    queryKey: keyOf(contract, input.params, input.query),
    queryFn: ({ signal }) => callDoor(contract, { params: input.params, query: input.query, signal }),
    enabled: input.enabled ?? true,
    ...(input.everyMs ? { refetchInterval: input.everyMs } : {}),
    ...(input.isFresh ? { refetchOnMount: 'always' as const } : {}),
  });
}

function cursorOf(page: unknown): string | undefined {
  const cursor = valueOf(page, 'nextCursor');
  return typeof cursor === 'string' ? cursor : undefined;
}

/** Reads a list a page at a time: `data.pages[].items`, `fetchNextPage`, `hasNextPage`. */
export function usePages<C extends ContractShape>(contract: C, input: ReadInput<C> = {}) {
  return useInfiniteQuery<AnswerOf<C>, ApiProblem, { pages: AnswerOf<C>[] }, readonly unknown[], string | undefined>({
    queryKey: [...keyOf(contract, input.params, input.query), 'pages'],
    queryFn: ({ pageParam, signal }) =>
      callDoor(contract, { params: input.params, query: input.query, cursor: pageParam, signal }),
    initialPageParam: undefined,
    getNextPageParam: cursorOf,
    enabled: input.enabled ?? true,
  });
}

/** A write: `mutateAsync({params, body, key})`; afterwards everything its contract touches is stale. */
export function useCall<C extends ContractShape>(contract: C) {
  const queries = useQueryClient();
  return useMutation<AnswerOf<C>, ApiProblem, CallInput<C>>({
    mutationFn: (input) => callDoor(contract, input),
    onSuccess: () => {
      // Not waited for: a form that is emptied only after the lists were read anew would take what was typed meanwhile.
      for (const noun of contract.touches ?? []) void queries.invalidateQueries({ queryKey: [noun] });
    },
  });
}
