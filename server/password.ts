// Hashes and checks secrets that people choose (passwords; the helpers' six digits), by scrypt as the sign-in library does. Keeps nothing.

import { hashPassword, verifyPassword } from 'better-auth/crypto';

/** A salted scrypt hash, about 100 ms of work on purpose. */
export function hashSecret(secret: string): Promise<string> {
  return hashPassword(secret);
}

export function matchesHash(secret: string, hash: string): Promise<boolean> {
  return verifyPassword({ hash, password: secret });
}
