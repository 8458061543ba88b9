// From each contract its route: who may knock, is the shape right, is the password right; then the action, then its answer, checked.
// Decides nothing about anybody's record: that is the action's.

import { Router, type Request, type Response } from 'express';
import { passwordMatches } from '@/server/auth/confirm';
import type { Asker, WhoIs } from '@/server/auth/actor';
import type { AccountActor, AnyoneActor, BareField } from '@/server/action';
import type { Env } from '@/server/env';
import { explainReasons } from '@/server/reasons';
import { refusalEntry, type AnyAction, type Transact } from '@/server/transact';
import type { ContractShape } from '@/shared/contracts/contract';
import { sendAnswer } from './answer';
import { readForm, readJson } from './body';
import { fieldsOf, unreadableFields } from './fields';
import type { LimitKind, Limits } from './limits';
import { requestIdOf, sendProblem, type BareProblem } from './problem';

export interface MountNeeds {
  env: Env;
  transact: Transact;
  whoIs: WhoIs;
  limits: Limits;
}

export function mount(actions: readonly AnyAction[], needs: MountNeeds): Router {
  const router = Router({ caseSensitive: true, strict: true });
  const open = actions.filter(({ contract }) => needs.env.isDemo || !contract.demo);
  for (const action of open) {
    const handle = (request: Request, response: Response) => answer(action, request, response, needs);
    if (action.contract.method === 'GET') router.get(action.contract.path, handle);
    else router.post(action.contract.path, handle);
  }
  for (const path of new Set(open.map(({ contract }) => contract.path))) {
    const allowed = open.filter(({ contract }) => contract.path === path).map(({ contract }) => contract.method);
    router.all(path, (request, response) => {
      response.setHeader(
        'Allow',
        allowed.flatMap((method) => (method === 'GET' ? ['GET', 'HEAD'] : [method])).join(', '),
      );
      sendProblem(request, response, {
        status: 405,
        code: 'method.not_allowed',
        facts: { allowed: allowed.join(', ') },
      });
    });
  }
  return router;
}

async function answer(action: AnyAction, request: Request, response: Response, needs: MountNeeds): Promise<void> {
  const { contract } = action;
  const { transact } = needs;
  const asker = contract.reach === 'open' ? anyone : await needs.whoIs(request.headers);
  const actor = actorFor(asker, contract);
  const refused = async (problem: BareProblem, by: AccountActor | null = actor.kind === 'account' ? actor : null) => {
    if (by) await noteRefusal(transact, contract, by, request, problem);
    sendProblem(request, response, problem);
  };
  if (asker.standing === 'anyone' && !contract.who.includes('anyone'))
    return refused({ status: 401, code: 'not_signed_in' });
  if (asker.standing === 'suspended') return refused({ status: 403, code: 'account.suspended' });
  if (asker.standing === 'lacks_second_factor' && contract.name !== 'account.read-me')
    return refused({ status: 403, code: 'second_factor.required' });
  if ('actor' in asker && !contract.who.includes(asker.actor.role))
    return refused({ status: 403, code: 'role.not_allowed', facts: { allowed: contract.who.join(', ') } }, asker.actor);

  const wait = await tooMany(contract, actor, request, needs.limits);
  if (wait !== null)
    return sendProblem(request, response, {
      status: 429,
      code: 'too_many_requests',
      facts: { seconds: wait },
      retryAfterSeconds: wait,
    });

  const read = await readRequest(contract, request, response);
  if ('problem' in read) return refused(read.problem);
  const wrong = await confirmProblem(contract, actor, read.body, needs);
  if (wrong) return refused(wrong);
  const confirmedAt = contract.confirm ? await transact.now() : null;

  const { params, query, body, key, file } = read;
  const outcome = await transact.run(action, {
    actor,
    params,
    query,
    body,
    key,
    file,
    confirmedAt,
    requestId: requestIdOf(request),
  });
  if (outcome.refusal) {
    const { status, code, fields, reasons, facts, participantId } = outcome.refusal;
    const explained = reasons
      ? await explainReasons(
          transact.db,
          reasons,
          participantId ?? (actor.kind === 'account' ? (actor.participantId ?? undefined) : undefined),
        )
      : undefined;
    return sendProblem(request, response, { status, code, facts, fields, reasons: explained });
  }
  sendAnswer(contract, outcome.answer, response);
}

const anyone: Asker = { standing: 'anyone' };
const nobody: AnyoneActor = { kind: 'anyone' };

function actorFor(asker: Asker, contract: ContractShape): AccountActor | AnyoneActor {
  return 'actor' in asker && contract.who.includes(asker.actor.role) ? asker.actor : nobody;
}

async function noteRefusal(
  transact: Transact,
  contract: ContractShape,
  actor: AccountActor,
  request: Request,
  problem: BareProblem,
): Promise<void> {
  const { status, code, fields } = problem;
  if (status !== 403 && status !== 422) return;
  await transact.note(actor, contract.name, requestIdOf(request), (tx) =>
    tx.record(refusalEntry({ refused: true, status, code, fields }, actor)),
  );
}

/** The doors worth guessing at. */
function limitOf(
  contract: ContractShape,
  actor: AccountActor | AnyoneActor,
  request: Request,
): [LimitKind, string] | null {
  if (contract.name === 'permit.issue' && actor.kind === 'account') return ['permit', actor.accountId];
  if (contract.who.includes('anyone') && contract.method === 'POST' && !contract.demo)
    return ['link', request.ip ?? ''];
  return null;
}

async function tooMany(
  contract: ContractShape,
  actor: AccountActor | AnyoneActor,
  request: Request,
  limits: Limits,
): Promise<number | null> {
  const limit = limitOf(contract, actor, request);
  return limit ? limits.count(...limit) : null;
}

interface ReadRequest {
  params: unknown;
  query: unknown;
  body: unknown;
  key: string | null;
  file: { bytes: Uint8Array; claimedType: string } | null;
}

async function readRequest(
  contract: ContractShape,
  request: Request,
  response: Response,
): Promise<ReadRequest | { problem: BareProblem }> {
  const params = contract.params?.safeParse(request.params);
  // An id that cannot be one is the id of nothing.
  if (params && (!params.success || unreadableFields(params.data).length > 0))
    return { problem: { status: 404, code: 'not_found' } };

  const sent =
    contract.method === 'GET'
      ? { body: undefined, file: null }
      : contract.upload
        ? await readForm(request, response)
        : await readJson(request, response);
  if ('problem' in sent) return sent;

  const query: unknown = { ...request.query };
  const unreadable = [...unreadableFields(query), ...unreadableFields(sent.body)];
  if (unreadable.length > 0) return { problem: { status: 422, code: 'invalid', fields: unreadable } };

  const fields: BareField[] = [];
  const parsedQuery = contract.query?.safeParse(query);
  if (parsedQuery && !parsedQuery.success) fields.push(...fieldsOf(parsedQuery.error.issues, query));
  if (!contract.query) fields.push(...Object.keys(request.query).map((path) => ({ path, code: 'unknown_field' })));
  const parsedBody = contract.body?.safeParse(sent.body);
  if (parsedBody && !parsedBody.success) fields.push(...fieldsOf(parsedBody.error.issues, sent.body));
  const { key, keyField } = keyOf(contract, request);
  if (keyField) fields.push(keyField);
  if (fields.length > 0) return { problem: { status: 422, code: 'invalid', fields } };
  return { params: params?.data, query: parsedQuery?.data, body: parsedBody?.data, key, file: sent.file };
}

/** Visible ASCII, at most 200: what a header can hold without anybody changing it. */
const keyForm = /^[\x21-\x7e]{1,200}$/;

function keyOf(contract: ContractShape, request: Request): { key: string | null; keyField?: BareField } {
  const key = request.get('idempotency-key') ?? null;
  if (!contract.once) return { key: null };
  if (key === null)
    return contract.once === 'required' ? { key, keyField: { path: 'Idempotency-Key', code: 'missing' } } : { key };
  return keyForm.test(key) ? { key } : { key, keyField: { path: 'Idempotency-Key', code: 'format.key' } };
}

async function confirmProblem(
  contract: ContractShape,
  actor: AccountActor | AnyoneActor,
  body: unknown,
  { transact, limits }: MountNeeds,
): Promise<BareProblem | null> {
  if (!contract.confirm) return null;
  const password = typeof body === 'object' && body !== null && 'password' in body ? body.password : undefined;
  if (actor.kind !== 'account' || typeof password !== 'string') return { status: 403, code: 'not_signed_in' };
  const wait = await limits.waitOf('confirm', actor.accountId);
  if (wait !== null)
    return { status: 429, code: 'too_many_requests', facts: { seconds: wait }, retryAfterSeconds: wait };
  if (await passwordMatches(transact.db, actor.accountId, password)) return null;
  await limits.count('confirm', actor.accountId);
  return { status: 422, code: 'invalid', fields: [{ path: 'password', code: 'password_wrong' }] };
}
