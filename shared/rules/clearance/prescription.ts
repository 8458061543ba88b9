// Clearance: the prescription's state, the course's count, and open lockouts.

import { lockoutLevels } from '@/shared/values/codes';
import { isoOf } from '@/shared/values/zone';
import type { Known } from '../known';
import { isPrescribed, type ClearanceContext } from './context';
import type { OverLimitFacts } from './facts';
import { reason, when, type Reason } from './reason';

/** A signature made a dose lawful by the limits of its day; a start asks those of today (safety rules §2). */
function overLimitReasons(rows: readonly OverLimitFacts[], known: Known): Reason[] {
  return rows.flatMap(({ quantity, ...row }) => {
    if (quantity !== 'unknown_fact') return [reason('dose_above_limit', { subject: quantity, ...row })];
    known.some('prescription.dose', undefined);
    return [];
  });
}

export function prescriptionReasons({ facts, known, now }: ClearanceContext): Reason[] {
  const prescription = known.some('prescription', facts.prescription);
  const status = known.word('prescription.status', prescription?.status, ['none', 'draft', 'signed']);
  if (status === 'none') return [reason('prescription_unsigned')];
  // A tier of `refuse` cannot be signed; if it stands there, the fact cannot be meant.
  const tier = known.word('prescription.tier', prescription?.tier, ['accept', 'second_signature']);
  const hasSecond = known.flag('prescription.second_signature', prescription?.hasSecondSignature);
  const isIntact = known.flag('prescription.intact', prescription?.isIntact);
  const isPaused = known.flag('prescription.paused', prescription?.isPaused);
  const expiresAt = known.instant('prescription.expires_at', prescription?.expiresAt);
  const version = known.amount('prescription.version', prescription?.version);
  const acknowledged = known.amount('prescription.acknowledged_version', prescription?.acknowledgedVersion);
  const isBehind = version !== undefined && acknowledged !== undefined && version > acknowledged;
  return [
    ...when(status === 'draft', 'prescription_unsigned'),
    ...when(isIntact === false, 'prescription_altered'),
    ...when(tier === 'second_signature' && hasSecond === false, 'second_signature_missing'),
    ...overLimitReasons(prescription?.overLimits ?? [], known),
    ...when(isPaused === true, 'prescription_paused'),
    ...when(expiresAt !== undefined && expiresAt <= now, 'prescription_expired'),
    ...when(isBehind, 'prescription_unacknowledged'),
  ];
}

export function courseReasons(context: ClearanceContext): Reason[] {
  if (!isPrescribed(context)) return [];
  const { facts, known } = context;
  const value = known.amount('prescription.sessions_done', facts.prescription?.sessionsDone);
  const limit = known.amount('prescription.sessions_total', facts.prescription?.sessionsTotal);
  const isDone = value !== undefined && limit !== undefined && value >= limit;
  return when(isDone, 'course_complete', { value, limit, layer: 'prescription' });
}

/** One reason for each open lockout. A hold ends by itself; a flag blocks nothing. */
export function lockoutReasons({ facts, known, now }: ClearanceContext): Reason[] {
  const reasons: Reason[] = [];
  for (const [index, lockout] of (known.some('lockouts', facts.lockouts) ?? []).entries()) {
    const subject = lockout.code;
    const level = known.word(`lockouts.${index}.level`, lockout.level, lockoutLevels);
    if (level === 'safety') reasons.push(reason('lockout_safety', { subject }));
    if (level === 'review') reasons.push(reason('lockout_review', { subject }));
    if (level === 'device') reasons.push(reason('lockout_device', { subject }));
    if (level !== 'hold') continue;
    const until = known.instant(`lockouts.${index}.until`, lockout.until);
    if (until !== undefined && until > now) reasons.push(reason('lockout_hold', { subject, until: isoOf(until) }));
  }
  return reasons;
}
