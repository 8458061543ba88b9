// The last stop of what went wrong: a fault becomes 500 with the request's id, a database that is away 503. Never a stack, never a reason.

import type { NextFunction, Request, Response } from 'express';
import { sqlStateOf } from '@/db/sql-state';
import { sendProblem, type BareProblem } from './problem';

/** Until the database may be back (own choice). */
const retrySeconds = 5;

/** Class 08 connection, 53 resources, 57 operator (shutdown, cancelled); and the network's own codes. */
const awayCodes = /^(08...|53...|57(014|P0[123])|ECONNREFUSED|ECONNRESET|ENOTFOUND|ETIMEDOUT|EPIPE|EAI_AGAIN)$/;
const awayWords =
  /timeout exceeded when trying to connect|Connection terminated|Client has encountered a connection error/i;

export function isDatabaseAway(error: unknown): boolean {
  const state = sqlStateOf(error);
  if (state !== undefined) return awayCodes.test(state);
  for (let cause = error; cause instanceof Error; cause = cause.cause) if (awayWords.test(cause.message)) return true;
  return false;
}

function problemOf(error: unknown): BareProblem {
  if (isDatabaseAway(error)) return { status: 503, code: 'database.away', retryAfterSeconds: retrySeconds };
  // A path such as /api/%E0%A4%A is the router's complaint, with its status.
  if (typeof error === 'object' && error !== null && 'status' in error && error.status === 400)
    return { status: 400, code: 'address.malformed' };
  return { status: 500, code: 'fault' };
}

export function answerFaults(error: unknown, request: Request, response: Response, next: NextFunction): void {
  const problem = problemOf(error);
  if (problem.status >= 500) request.log.error({ err: error }, 'fault');
  // Half an answer is out: only cutting the connection tells the client that it is not whole.
  if (response.headersSent) return next(error);
  sendProblem(request, response, problem);
}
