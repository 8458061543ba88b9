// Every answer that is not the one asked for: RFC 9457 problem details with a stable code and sentences from locales/. Decides nothing.

import type { Request, Response } from 'express';
import type { BareField } from '@/server/action';
import { hasWords, sentence, type Facts } from '@/server/words';
import type { FieldProblem, Problem, Reason } from '@/shared/contracts/problem';

export interface BareProblem {
  status: number;
  code: string;
  facts?: Facts | undefined;
  fields?: readonly BareField[] | undefined;
  reasons?: readonly Reason[] | undefined;
  retryAfterSeconds?: number | undefined;
}

/** The request's id, which the log has too. */
export function requestIdOf(request: Request): string {
  return String(request.id);
}

export function problemOf({ status, code, facts, fields, reasons }: BareProblem, requestId: string): Problem {
  const key = `errors:code.${code}`;
  return {
    type: `urn:rampwell:problem:${code}`,
    title: sentence(hasWords(`errors:title.${status}`) ? `errors:title.${status}` : 'errors:title.other'),
    status,
    detail: sentence(hasWords(key) ? key : 'errors:code.other', facts),
    code,
    requestId,
    ...(fields ? { fields: fields.map(fieldProblem) } : {}),
    ...(reasons ? { reasons: [...reasons] } : {}),
  };
}

function fieldProblem({ path, code, facts }: BareField): FieldProblem {
  const key = [`errors:field.${code}`, `errors:code.${code}`].find(hasWords) ?? 'errors:field.other';
  return { path, code, message: sentence(key, facts) };
}

export function sendProblem(request: Request, response: Response, problem: BareProblem): void {
  if (problem.retryAfterSeconds !== undefined) response.setHeader('Retry-After', String(problem.retryAfterSeconds));
  response
    .status(problem.status)
    .type('application/problem+json')
    .send(JSON.stringify(problemOf(problem, requestIdOf(request))));
}
