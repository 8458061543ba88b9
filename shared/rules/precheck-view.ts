// A stored pre-check as it is told: with the instant at which it is over. Judges nothing.

import { z } from 'zod';
import { precheckOutcomes } from '@/shared/values/codes';
import { minuteMilliseconds } from '@/shared/values/units';
import { isoOf, parseInstant } from '@/shared/values/zone';
import { precheckLifeMinutes } from './clearance/precheck';

const open = z.array(z.string());
const findings = z.array(z.strictObject({ code: z.string(), outcome: z.string() }));
const outcome = z.enum(precheckOutcomes).nullable();

export function precheckView(row: {
  readonly id: string;
  readonly answeredAt: string;
  readonly complete: boolean;
  readonly open: unknown;
  readonly outcome: string | null;
  readonly findings: unknown;
  readonly emergencyAdvice: boolean;
}) {
  const answered = parseInstant(row.answeredAt) ?? Number.NaN;
  return {
    id: row.id,
    answeredAt: row.answeredAt,
    expiresAt: isoOf(answered + precheckLifeMinutes * minuteMilliseconds),
    complete: row.complete,
    open: open.parse(row.open),
    outcome: outcome.parse(row.outcome),
    findings: findings.parse(row.findings),
    emergencyAdvice: row.emergencyAdvice,
  };
}
