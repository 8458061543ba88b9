// The next step of a row on the worklist, and when a page that is given back goes on to the next contact. Sorts nothing.

import type { WorklistLevel } from '@/shared/values/codes';
import { minuteMilliseconds } from '@/shared/values/units';
import { isoOf, parseInstant } from '@/shared/values/zone';
import { escalationMinutes } from './house-limits';

export type NextStep = 'review' | 'open_session' | 'sign' | 'call' | 'device' | 'train' | 'look';
export type ItemFacts = {
  readonly level: WorklistLevel;
  readonly why: string;
  readonly sessionId: string | null;
  readonly lockoutId: string | null;
};

/** What a telephone call settles best. */
const callFor: ReadonlySet<string> = new Set(['missed_three', 'adherence_low', 'recall_needed', 'course_ending']);
const trainFor: ReadonlySet<string> = new Set(['training_due', 'watched_session_due']);
const equipFor: ReadonlySet<string> = new Set(['device_return', 'supply_due']);

export function nextStep({ level, why, sessionId, lockoutId }: ItemFacts): NextStep {
  if (why === 'second_signature') return 'sign';
  // Whatever locks a person out is lifted by a review, a device hold too.
  if (lockoutId !== null || level === 'safety' || level === 'review') return 'review';
  if (callFor.has(why)) return 'call';
  if (trainFor.has(why)) return 'train';
  if (level === 'device' || equipFor.has(why)) return 'device';
  return sessionId === null ? 'look' : 'open_session';
}

/** A safety page that is given back waits for somebody again; null for what is no page. */
export function escalatesAgainAt(level: WorklistLevel, now: string): string | null {
  const at = parseInstant(now);
  return level === 'safety' && at !== undefined ? isoOf(at + escalationMinutes * minuteMilliseconds) : null;
}
