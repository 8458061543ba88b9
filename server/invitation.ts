// Tokens that travel by mail (invitations, "stop these mails"). Only their hash is stored: a stolen database opens no door.

import { createHash, randomBytes } from 'node:crypto';

/** 32 random bytes: as much as an Ed25519 key, far beyond guessing (own choice). */
const tokenBytes = 32;

/** The hash under which a token is looked up. Tokens are random, so a plain hash is enough: there is nothing to guess. */
export function hashOfMailToken(token: string): string {
  return createHash('sha256').update(token).digest('hex');
}

/** A new token, for the mail alone, and its hash, for the row. */
export function newMailToken(): { token: string; hash: string } {
  const token = randomBytes(tokenBytes).toString('base64url');
  return { token, hash: hashOfMailToken(token) };
}
