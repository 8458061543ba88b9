// What a site's protocol says, as a shape: its limits and its terms. Whether a limit is allowed is asked of shared/rules/site-limits.ts; what
// ships until a site signs its own stands in shared/rules/protocol-defaults.ts.

import { z } from 'zod';
import { Email, Instant, PersonName, Phone } from './primitives';

/** Far beyond any amount of the trade, in whatever unit (own choice): a slip of the keyboard is told by its field. */
const amount = z.number().min(0).max(1_000_000);

/** Numbers only; whether they are allowed is `siteLimitsAllowed`, so that a refusal can name the ceiling. */
export const siteLimitsSchema = z.strictObject({
  routineCurrentMilliamp: amount,
  mostCurrentMilliamp: amount,
  routineMinutes: amount,
  mostMinutes: amount,
  routineChargeCoulomb: amount,
  mostChargeCoulomb: amount,
  routineDensityMilliampPerSquareCentimetre: amount,
  mostDensityMilliampPerSquareCentimetre: amount,
  /** A smaller pad needs a second signature. */
  routineAreaSquareCentimetre: amount,
  routineSessionsPerDay: z.number().int().min(1).max(10),
  mostMinutesPerDay: amount,
  /** A shorter gap needs a second signature; below `leastGapHours` it is refused. */
  routineGapHours: amount,
  leastGapHours: amount,
  routineCharge24hCoulomb: amount,
  mostCharge24hCoulomb: amount,
  routineCharge7dCoulomb: amount,
  mostCharge7dCoulomb: amount,
  /** Most current under 18 years; null = this site treats no minors. */
  minorCurrentMilliamp: amount.nullable(),
  /** The one row for small gel electrodes is switched on. */
  allowsRings: z.boolean(),
});
export type SiteLimits = z.infer<typeof siteLimitsSchema>;

export const ProtocolSettings = z.strictObject({
  limits: siteLimitsSchema,
  consentVersion: z.number().int().min(1).max(1000),
  consentRequiredFrom: Instant,
  screeningValidDays: z.number().int().min(1).max(365),
  trainingValidDays: z.number().int().min(1).max(365),
  watchedSessionsRequired: z.number().int().min(0).max(20),
  excludesPregnancy: z.boolean(),
  moodCheckEveryDays: z.number().int().min(1).max(60).nullable(),
  retentionYears: z.number().int().min(1).max(50),
  /** Who is paged, in this order, until somebody acknowledges. */
  contacts: z
    .array(z.strictObject({ name: PersonName, email: Email, phone: Phone }))
    .min(1)
    .max(10),
});
export type ProtocolSettings = z.infer<typeof ProtocolSettings>;
