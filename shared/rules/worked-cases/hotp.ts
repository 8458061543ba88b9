// Check values of one-time codes: kind `hotp`, for the published values of RFC 4226.

import { z } from 'zod';
import { codeDigits, hotpCode } from '../hotp';
import { kindOf } from './form';

/** Two characters a byte. */
const hexPair = /../g;

export const hotpNumbers = kindOf(
  z.strictObject({
    secret_hex: z.string().regex(/^([0-9a-f]{2})+$/i),
    counter: z.number().int().min(0),
    digits: z.number().int().min(codeDigits.least).max(codeDigits.most),
  }),
  ({ secret_hex, counter, digits }) => {
    const secret = Uint8Array.from(secret_hex.match(hexPair) ?? [], (pair) => Number.parseInt(pair, 16));
    return { code: hotpCode(secret, counter, digits) };
  },
);
