// One-time codes by counter (HOTP, RFC 4226), for stimulators without a radio. Reckons and compares; keeps no secret and no counter.

import { hmac } from '@noble/hashes/hmac.js';
import { sha1 } from '@noble/hashes/legacy.js';

/** RFC 4226 §5.3: at least 6 digits, possibly 7 or 8. */
export const codeDigits = { least: 6, most: 8 } as const;

/** RFC 4226 §5.3: 160 bits, as long as the hash that they key (R6 of §4 asks for 128 at least). */
export const secretBytes = 20;

const counterBytes = 8;

/** RFC 4226 §5.2 and §5.3: HMAC-SHA-1 of the counter, cut to 31 bits at the place that the last nibble names. */
export function hotpCode(secret: Uint8Array, counter: number, digits: number): string {
  const moving = new DataView(new ArrayBuffer(counterBytes));
  moving.setBigUint64(0, BigInt(counter));
  const mac = hmac(sha1, secret, new Uint8Array(moving.buffer));
  const view = new DataView(mac.buffer, mac.byteOffset, mac.byteLength);
  const number = view.getUint32(view.getUint8(mac.length - 1) & 0xf) & 0x7fffffff;
  return String(number % 10 ** digits).padStart(digits, '0');
}

/**
 * RFC 4226 §7.4: the counter of a typed code, looked for from the first that is not used yet over `window` counters; null when it
 * is none of them. Looks at all of them, so that the time it takes tells nothing.
 */
export function counterOfCode(
  secret: Uint8Array,
  typed: string,
  { firstCounter, window, digits }: { firstCounter: number; window: number; digits: number },
): number | null {
  let found: number | null = null;
  for (let counter = firstCounter; counter < firstCounter + window; counter += 1) {
    if (hotpCode(secret, counter, digits) === typed && found === null) found = counter;
  }
  return found;
}
