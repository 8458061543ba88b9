// A caregiver's own six digits, kept as a scrypt hash with its own salt. Six digits are few: whoever checks them limits the tries.

import { randomBytes, scrypt, timingSafeEqual } from 'node:crypto';

/** Cost as Node's default (N = 2^14, r = 8, p = 1), about 50 ms a hash; lengths as the sign-in library's (own choice). */
const saltBytes = 16;
const hashBytes = 64;

function derive(code: string, salt: Buffer): Promise<Buffer> {
  return new Promise((resolve, reject) => {
    scrypt(code, salt, hashBytes, (error, hash) => (error ? reject(error) : resolve(hash)));
  });
}

/** `salt:hash`, both in hexadecimal digits. */
export async function hashCode(code: string): Promise<string> {
  const salt = randomBytes(saltBytes);
  const hash = await derive(code, salt);
  return `${salt.toString('hex')}:${hash.toString('hex')}`;
}

/** False for a wrong code and for a stored text that is no hash. */
export async function verifyCode(code: string, stored: string): Promise<boolean> {
  const [salt, hash] = stored.split(':').map((part) => Buffer.from(part, 'hex'));
  if (!salt || !hash || salt.length !== saltBytes || hash.length !== hashBytes) return false;
  return timingSafeEqual(await derive(code, salt), hash);
}
