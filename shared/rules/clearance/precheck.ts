// Clearance: the pre-check that was answered for this start, and the helper.

import { precheckOutcomes } from '@/shared/values/codes';
import { minuteMilliseconds } from '@/shared/values/units';
import { isoOf, parseInstant } from '@/shared/values/zone';
import { holdUntilTomorrow } from '../hold';
import { isPrescribed, type ClearanceContext } from './context';
import { reason, when, type Reason } from './reason';

/** Own choice. At exactly 30 min a pre-check is over. */
export const precheckLifeMinutes = 30;

/** What the outcome itself holds, and what a hold that ran while it was answered does to it. One reason at most. */
function holdReason(context: ClearanceContext, answeredAt: number | undefined): Reason[] {
  const { facts, known, now, zone } = context;
  const outcome = known.word('precheck.outcome', facts.precheck?.outcome, precheckOutcomes);
  if (outcome === 'hold_review' || outcome === 'emergency') {
    return [reason('precheck_hold', { resolvedBy: 'clinician', subject: outcome })];
  }
  if (outcome === 'hold_tomorrow') {
    const until = answeredAt === undefined ? undefined : holdUntilTomorrow(answeredAt, zone);
    const isToCome = until !== undefined && until > now && zone !== undefined;
    // Past its end only a new pre-check is needed, which the person can answer.
    return [
      reason('precheck_hold', {
        subject: outcome,
        resolvedBy: isToCome ? 'time' : 'participant',
        until: isToCome ? isoOf(until) : undefined,
      }),
    ];
  }
  const wasHeld = (facts.lockouts ?? []).some(({ level, until }) => {
    const end = level === 'hold' ? parseInstant(until) : undefined;
    return end !== undefined && end <= now && answeredAt !== undefined && answeredAt < end;
  });
  return when(wasHeld, 'precheck_hold', { subject: 'answered_during_hold' });
}

/** An assisted prescription, or anybody under 18, needs somebody beside them, whatever the prescription says. */
function helperReasons(context: ClearanceContext): Reason[] {
  const { facts, known, isMinor } = context;
  const isAssisted = isPrescribed(context)
    ? known.flag('prescription.assisted', facts.prescription?.isAssisted)
    : undefined;
  if (facts.precheck === undefined) return [];
  const isPresent = known.flag('precheck.helper_present', facts.precheck.isHelperPresent);
  return when((isAssisted === true || isMinor === true) && isPresent === false, 'helper_absent');
}

export function precheckReasons(context: ClearanceContext): Reason[] {
  const { facts, known, now } = context;
  const asker = known.text('asker', facts.asker);
  const participantId = known.text('participant.id', facts.participant?.id);
  const precheck = facts.precheck;
  if (precheck === undefined) return [reason('precheck_missing'), ...helperReasons(context)];
  const answeredAt = known.instant('precheck.answered_at', precheck.answeredAt);
  const by = known.text('precheck.by', precheck.answeredBy);
  const value = answeredAt === undefined ? undefined : (now - answeredAt) / minuteMilliseconds;
  const isOver = value !== undefined && value >= precheckLifeMinutes;
  const isOther =
    by !== undefined &&
    ((asker !== undefined && by !== asker) || (participantId !== undefined && by !== participantId));
  return [
    ...when(isOver, 'precheck_expired', { value, limit: precheckLifeMinutes, unit: 'min', layer: 'default' }),
    ...when(isOther, 'precheck_other_person'),
    ...holdReason(context, answeredAt),
    ...helperReasons(context),
  ];
}
