// Shapes of the small values that stand in every contract: ids, instants, days, names, amounts.
// Shape only: what is allowed as a dose or a schedule is the rules' business.

import { z } from 'zod';

export const Uuid = z.uuid();
/** An instant in UTC, `2026-05-12T16:00:00.000Z`. */
export const Instant = z.iso.datetime();
/** A calendar day, `2026-05-12`. */
export const LocalDate = z.iso.date();
/** A wall-clock time, `16:00`. */
export const LocalTime = z.string().regex(/^([01]\d|2[0-3]):[0-5]\d$/);
/** An IANA zone that this runtime knows. */
export const Zone = z
  .string()
  .max(60)
  .refine((zone) => {
    try {
      new Intl.DateTimeFormat('en', { timeZone: zone });
      return /^[A-Za-z]/.test(zone);
    } catch {
      return false;
    }
  }, 'unknown_zone');
export const Email = z.string().trim().toLowerCase().max(254).pipe(z.email());
export const PersonName = z.string().trim().min(1).max(120);
/** One line typed by a person. */
export const Line = z.string().trim().min(1).max(200);
/** A reason or a remark typed by a person. */
export const Paragraph = z.string().trim().min(1).max(2000);
export const Phone = z.string().trim().min(3).max(30).regex(/^[+0-9 ()./-]+$/);
export const Language = z.enum(['en']);
/** As typed at sign-up: long rather than intricate (NIST SP 800-63B, 2017, from memory). */
export const NewPassword = z.string().min(12).max(128);
/** As typed to confirm a signature. */
export const PasswordAgain = z.string().min(1).max(128);
/** A token that came by mail. */
export const MailToken = z.string().min(20).max(200);

export const Milliamp = z.number().min(0).max(1000);
export const Seconds = z.number().min(0).max(1_000_000);
/** 1 = Monday … 7 = Sunday (ISO 8601). */
export const Weekday = z.number().int().min(1).max(7);

/** Query of a list: where the last page ended, and how many rows. */
export const pageQuery = {
  cursor: z.string().max(300).optional(),
  limit: z.coerce.number().int().min(1).max(100).default(50),
};
/** Answer of a list. */
export function pageOf<T extends z.ZodType>(item: T) {
  return z.strictObject({ items: z.array(item), nextCursor: z.string().nullable() });
}
