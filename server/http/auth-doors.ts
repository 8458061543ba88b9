// The way to the sign-in library: strict bodies in, problem details out, each knock in the audit trail. Signs nobody in itself.

import { Router, type Request, type Response } from 'express';
import { findAccountByEmail } from '@/db/queries/account';
import type { Actor } from '@/server/action';
import { addressHeader, type Auth } from '@/server/auth/auth';
import type { WhoIs } from '@/server/auth/actor';
import { authDoors, type AuthDoor } from '@/server/auth/doors';
import type { Transact } from '@/server/transact';
import { readJson } from './body';
import { fieldsOf, unreadableFields } from './fields';
import type { Limits } from './limits';
import { requestIdOf, sendProblem, type BareProblem } from './problem';

interface Needs {
  auth: Auth;
  transact: Transact;
  whoIs: WhoIs;
  limits: Limits;
  baseUrl: string;
}

export function authRouter(needs: Needs): Router {
  const router = Router({ caseSensitive: true, strict: true });
  for (const door of authDoors) {
    router.post(door.path, (request, response) => knock(door, request, response, needs));
    router.all(door.path, (request, response) => {
      response.setHeader('Allow', 'POST');
      sendProblem(request, response, { status: 405, code: 'method.not_allowed', facts: { allowed: 'POST' } });
    });
  }
  return router;
}

async function knock(door: AuthDoor, request: Request, response: Response, needs: Needs): Promise<void> {
  const sent = await readJson(request, response);
  if ('problem' in sent) return sendProblem(request, response, sent.problem);
  const unreadable = unreadableFields(sent.body);
  const parsed = door.body.safeParse(sent.body);
  if (unreadable.length > 0 || !parsed.success) {
    const fields = parsed.error ? fieldsOf(parsed.error.issues, sent.body) : [];
    return sendProblem(request, response, {
      status: 422,
      code: 'invalid',
      fields: unreadable.length > 0 ? unreadable : fields,
    });
  }
  const body: unknown = parsed.data;
  const wait = await tooMany(door, body, request, needs.limits);
  if (wait !== null)
    return sendProblem(request, response, {
      status: 429,
      code: 'too_many_requests',
      facts: { seconds: wait },
      retryAfterSeconds: wait,
    });

  // Who it was must be asked before a sign-out, and after a sign-in.
  const before = await needs.whoIs(request.headers);
  const answer = await needs.auth.handler(passedOn(door, body, request, needs.baseUrl));
  const cookies = answer.headers.getSetCookie();
  if (cookies.length > 0) response.setHeader('Set-Cookie', cookies);
  const said: unknown = await answer.json().catch(() => null);
  if (!answer.ok) {
    if (answer.status >= 500) throw new Error(`The sign-in library failed at ${door.path} with ${answer.status}`);
    const problem = problemOf(door, answer.status, codeOf(said));
    await note(door, body, 'actor' in before ? before.actor : null, request, needs.transact, problem);
    return sendProblem(request, response, problem);
  }
  const after =
    'actor' in before
      ? before
      : await needs.whoIs({ cookie: cookies.map((cookie) => cookie.split(';')[0]).join('; ') });
  await note(door, body, 'actor' in after ? after.actor : null, request, needs.transact, null);
  if (door.name === 'account.sign-in') await needs.limits.forget('sign_in', emailOf(body) ?? '');
  response.status(200).json(door.answer.parse(said ?? {}));
}

/** The library is given what we read and checked, not what came: the same address everywhere, no header of the client's choosing. */
function passedOn(door: AuthDoor, body: unknown, request: Request, baseUrl: string): globalThis.Request {
  const headers = new Headers({
    'content-type': 'application/json',
    origin: baseUrl,
    [addressHeader]: request.ip ?? '',
  });
  for (const name of ['cookie', 'user-agent']) {
    const value = request.get(name);
    if (value) headers.set(name, value);
  }
  return new globalThis.Request(`${baseUrl}/api/auth${door.path}`, {
    method: 'POST',
    headers,
    body: JSON.stringify(body),
  });
}

function emailOf(body: unknown): string | undefined {
  return typeof body === 'object' && body !== null && 'email' in body && typeof body.email === 'string'
    ? body.email
    : undefined;
}

async function tooMany(door: AuthDoor, body: unknown, request: Request, limits: Limits): Promise<number | null> {
  const network = request.ip ?? '';
  if (door.path === '/request-password-reset')
    return (await limits.count('reset_network', network)) ?? limits.count('reset', emailOf(body) ?? '');
  if (door.path === '/sign-in/email')
    return (await limits.count('sign_in_network', network)) ?? limits.count('sign_in', emailOf(body) ?? '');
  return limits.count('sign_in_network', network);
}

function codeOf(said: unknown): string {
  return typeof said === 'object' && said !== null && 'code' in said ? String(said.code) : '';
}

/** The library's codes in the house's words. */
const codes: Record<string, { status: number; code: string; field?: string }> = {
  INVALID_EMAIL_OR_PASSWORD: { status: 401, code: 'sign_in.wrong' },
  INVALID_TOKEN: { status: 409, code: 'reset.link_ended' },
  INVALID_PASSWORD: { status: 422, code: 'invalid', field: 'password_wrong' },
  INVALID_CODE: { status: 401, code: 'second_factor.wrong' },
  INVALID_BACKUP_CODE: { status: 401, code: 'second_factor.wrong' },
  INVALID_TWO_FACTOR_COOKIE: { status: 401, code: 'second_factor.start_again' },
  TOO_MANY_ATTEMPTS_REQUEST_NEW_CODE: { status: 401, code: 'second_factor.start_again' },
  TOTP_NOT_ENABLED: { status: 409, code: 'second_factor.not_set_up' },
  TWO_FACTOR_NOT_ENABLED: { status: 409, code: 'second_factor.not_set_up' },
  BACKUP_CODES_NOT_ENABLED: { status: 409, code: 'second_factor.not_set_up' },
};

function problemOf(door: AuthDoor, status: number, code: string): BareProblem {
  const known = codes[code];
  if (known?.field)
    return {
      status: known.status,
      code: known.code,
      fields: [{ path: door.path === '/change-password' ? 'currentPassword' : 'password', code: known.field }],
    };
  if (known) return { status: known.status, code: known.code };
  if (status === 401) return { status: 401, code: 'not_signed_in' };
  if (status === 429 || status === 423) return { status: 429, code: 'second_factor.locked' };
  return { status, code: 'sign_in.refused' };
}

/** One entry a knock: in the chain of the person it concerns, without the address or the password that was typed. */
async function note(
  door: AuthDoor,
  body: unknown,
  actor: Actor | null,
  request: Request,
  transact: Transact,
  problem: BareProblem | null,
): Promise<void> {
  const email = emailOf(body);
  const known = actor?.kind === 'account' ? null : email ? await findAccountByEmail(transact.db, email) : null;
  // A request for a reset is noted where the mail is kept, and nowhere for an address that is nobody's.
  if (door.name === 'account.request-reset' || (!known && actor === null && problem === null)) return;
  const own = actor?.kind === 'account' ? actor : null;
  await transact.note(actor ?? { kind: 'anyone' }, door.name, requestIdOf(request), (tx) =>
    tx.record({
      participantId: own?.participantId ?? known?.participantId ?? undefined,
      siteId: own?.siteIds[0] ?? known?.siteId ?? undefined,
      kind: problem ? 'refusal' : 'write',
      subject: own ? { kind: 'account', id: own.accountId } : known ? { kind: 'account', id: known.id } : undefined,
      after: problem ? { code: problem.code } : undefined,
    }),
  );
}
