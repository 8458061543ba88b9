// Which one sentence stands on Today, from the server's answer. It orders what to show; the server has decided.

import type { ClearanceView } from '@/shared/contracts/clearance';

export type TodayState =
  | 'withdrawn'
  | 'finished'
  | 'running'
  | 'waiting'
  | 'acknowledge'
  | 'acknowledgeFirst'
  | 'diary'
  | 'record'
  | 'nextDay'
  | 'start'
  | 'check'
  | 'hold'
  | 'early'
  | 'notReady';

const holdCodes = ['lockout_safety', 'lockout_review', 'lockout_device', 'lockout_hold', 'precheck_hold'];

/**
 * @param answer the server's clearance
 * @param facts what the page knows besides: the person's state, and whether this phone holds the running session
 */
export function todayState(answer: ClearanceView, facts: { personState: string; isRunningHere: boolean }): TodayState {
  const has = (code: string) => answer.reasons.some((reason) => reason.code === code);
  if (facts.personState === 'withdrawn') return 'withdrawn';
  if (facts.isRunningHere) return 'running';
  if (answer.livePermitId) return 'waiting';
  // What was felt is asked before anything else: it may hold the next session.
  if (answer.diaryDueSessionId) return 'diary';
  if (has('course_complete') || facts.personState === 'finished') return 'finished';
  if (answer.reasons.some((reason) => holdCodes.includes(reason.code))) return 'hold';
  if (answer.prescriptionToAcknowledgeId) return answer.acknowledgedVersion === 0 ? 'acknowledgeFirst' : 'acknowledge';
  if (has('session_open')) return 'record';
  if (answer.nextDayDueSessionId) return 'nextDay';
  if (answer.allowed) return 'start';
  if (answer.readyForPrecheck) return 'check';
  const waitsForTime = answer.reasons.every((reason) => reason.until !== null || reason.code === 'precheck_missing' || reason.code === 'precheck_expired');
  return waitsForTime ? 'early' : 'notReady';
}
