// Clearance: the account, consent, screening, training, watched first sessions, mood check.

import type { ClearanceContext } from './context';
import { reason, when, type Reason } from './reason';

export function accountReasons({ facts, known }: ClearanceContext): Reason[] {
  const account = known.some('account', facts.account);
  return when(known.flag('account.active', account?.isActive) === false, 'account_inactive');
}

/** Own consent of an adult; guardian's consent and own assent of a minor. A withdrawal stops either at once. */
export function consentReasons({ facts, known, now, isMinor }: ClearanceContext): Reason[] {
  const consent = known.some('consent', facts.consent);
  const reasons = when(known.flag('consent.withdrawn', consent?.isWithdrawn) === true, 'consent_withdrawn');
  const required = known.amount('consent.required_version', consent?.requiredVersion);
  const requiredFrom = known.instant('consent.required_from', consent?.requiredFrom);
  const previous = known.amount('consent.previous_version', consent?.previousVersion);
  // In force at its very instant: what waits until T is open at T.
  const inForce = requiredFrom === undefined ? undefined : requiredFrom <= now ? required : previous;
  if (isMinor === true) {
    const guardian = known.amount('consent.guardian_version', consent?.guardianVersion);
    const assent = known.amount('consent.assent_version', consent?.assentVersion);
    const isBehind = (version: number | undefined) =>
      version !== undefined && (version < 1 || (inForce !== undefined && version < inForce));
    reasons.push(...when(isBehind(guardian), 'guardian_consent_missing'), ...when(isBehind(assent), 'assent_missing'));
    return reasons;
  }
  const signed = known.amount('consent.signed_version', consent?.signedVersion);
  // Without an age it is not known whose signature is needed, and that fact refuses already.
  if (isMinor === undefined || signed === undefined) return reasons;
  if (signed < 1) reasons.push(reason('consent_missing'));
  else if (inForce !== undefined && signed < inForce) reasons.push(reason('consent_outdated'));
  return reasons;
}

export function screeningReasons({ facts, known, now }: ClearanceContext): Reason[] {
  const screening = known.some('screening', facts.screening);
  const isComplete = known.flag('screening.complete', screening?.isComplete);
  if (isComplete === false) {
    return [reason('screening_incomplete'), ...when(screening?.outcome === 'excluded', 'screening_excluded')];
  }
  const outcome = known.word('screening.outcome', screening?.outcome, ['clear', 'excluded']);
  const validUntil = known.instant('screening.valid_until', screening?.validUntil);
  return [
    ...when(outcome === 'excluded', 'screening_excluded'),
    ...when(isComplete === true && validUntil !== undefined && validUntil <= now, 'screening_expired'),
  ];
}

export function trainingReasons({ facts, known, now }: ClearanceContext): Reason[] {
  const training = known.some('training', facts.training);
  const isSignedOff = known.flag('training.signed_off', training?.isSignedOff);
  if (isSignedOff === false) return [reason('training_missing')];
  const validUntil = known.instant('training.valid_until', training?.validUntil);
  return when(isSignedOff === true && validUntil !== undefined && validUntil <= now, 'training_expired');
}

export function supervisionReasons({ facts, known }: ClearanceContext): Reason[] {
  const supervision = known.some('supervision', facts.supervision);
  const limit = known.amount('supervision.required', supervision?.requiredSessions);
  const value = known.amount('supervision.watched', supervision?.watchedSessions);
  const isWatchedNow = known.flag('supervision.watched_now', supervision?.isWatchedNow);
  if (limit === undefined || value === undefined || isWatchedNow !== false) return [];
  return when(value < limit, 'supervision_due', { value, limit, layer: 'site' });
}

/** null = the protocol asks none; undefined = not known. */
export function moodCheckReasons({ facts, known, now }: ClearanceContext): Reason[] {
  const dueAt = known.some('mood_check.due_at', known.some('mood_check', facts.moodCheck)?.dueAt);
  if (dueAt === undefined || dueAt === null) return [];
  const due = known.instant('mood_check.due_at', dueAt);
  return when(due !== undefined && due <= now, 'mood_check_due');
}
