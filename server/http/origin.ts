// Who may send what changes something: our own pages only, said by Origin, or by Sec-Fetch-Site where a browser leaves Origin out.
// Together with the cookie's SameSite this keeps other sites from acting in somebody's name. No custom header is needed.

import type { NextFunction, Request, Response } from 'express';
import type { Env } from '@/server/env';
import { sendProblem } from './problem';

const safeMethods: readonly string[] = ['GET', 'HEAD', 'OPTIONS'];

export function checkOrigin(env: Pick<Env, 'baseUrl' | 'baseUrlIsGiven'>) {
  return (request: Request, response: Response, next: NextFunction): void => {
    if (safeMethods.includes(request.method)) return next();
    const { origin } = request.headers;
    if (origin === undefined) {
      if (request.headers['sec-fetch-site'] === 'same-origin') return next();
      return sendProblem(request, response, { status: 403, code: 'origin.missing' });
    }
    if (isOwn(origin, request, env)) return next();
    return sendProblem(request, response, { status: 403, code: 'origin.foreign' });
  };
}

/**
 * With an address given at the start, that one alone is ours. Without, it is whatever this server was called by: a page elsewhere cannot
 * choose the Host that a browser sends.
 */
function isOwn(
  origin: string,
  request: Request,
  { baseUrl, baseUrlIsGiven }: Pick<Env, 'baseUrl' | 'baseUrlIsGiven'>,
): boolean {
  if (origin === baseUrl) return true;
  return !baseUrlIsGiven && origin === `${request.protocol}://${request.headers.host ?? ''}`;
}
