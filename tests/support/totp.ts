// What: the six digits that an authenticator shows (RFC 6238 with SHA-1, 30 s, 6 digits), for tests that sign in with a second factor.
// Must not: be used by the product, which has its library for that.
import { createHmac } from 'node:crypto';

const alphabet = 'ABCDEFGHIJKLMNOPQRSTUVWXYZ234567';

function bytesOf(base32: string): Buffer {
  const bits = [...base32.replace(/=+$/, '')]
    .map((letter) => alphabet.indexOf(letter).toString(2).padStart(5, '0'))
    .join('');
  return Buffer.from((bits.match(/.{8}/g) ?? []).map((byte) => Number.parseInt(byte, 2)));
}

export function totp(secret: string, atMilliseconds = Date.now()): string {
  const counter = Buffer.alloc(8);
  counter.writeBigUInt64BE(BigInt(Math.floor(atMilliseconds / 30_000)));
  const digest = createHmac('sha1', bytesOf(secret)).update(counter).digest();
  const offset = (digest.at(-1) ?? 0) & 15;
  return String((digest.readUInt32BE(offset) & 0x7fffffff) % 1_000_000).padStart(6, '0');
}
