// From what the lockout rules found to findings that are stored, shown to staff and paged; and which finished reports somebody should look
// at. The rules themselves are lockout.ts and worklist.ts.

import type { Finding } from './consequences';
import type { LockoutAnswer } from './lockout';
import { reportWorthLooking, type SessionReportFacts } from './worklist';

type Facts = NonNullable<Finding['facts']>;

/** Whatever the rule pages about is paged: safety, and a device that gave too much. */
export function findingsOfEffects({ effects, pageStaff }: LockoutAnswer, facts: Facts): Finding[] {
  return effects.map(({ code, level }) => ({
    code,
    level,
    facts,
    isPaged: pageStaff && (level === 'safety' || code === 'over_current'),
  }));
}

/** One row a report and one for a strong effect, whoever tells of it first. */
function looks(report: SessionReportFacts, sessionId: string, isDiary: boolean): Finding[] {
  const reasons = reportWorthLooking(report);
  const worst = report.effects.reduce<SessionReportFacts['effects'][number] | undefined>(
    (most, effect) => (most === undefined || effect.strength > most.strength ? effect : most),
    undefined,
  );
  const number = report.number;
  const facts: Facts = worst === undefined ? { number } : { number, effect: worst.kind, strength: worst.strength };
  const strong: Finding = { code: 'strong_effect', level: 'look', facts, matter: `strong_effect:${sessionId}` };
  // A first session is worth a look once its diary tells how it was.
  const rest = reasons.find((reason) => reason !== 'strong_effect' && (reason === 'first_session') === isDiary);
  const isStrong = reasons.includes('strong_effect');
  return [
    ...(isStrong ? [strong] : []),
    ...(rest !== undefined && !(isDiary && isStrong)
      ? [{ code: rest, level: 'look' as const, facts: { number }, matter: `report:${sessionId}` }]
      : []),
  ];
}

/** As soon as the record is whole. */
export function looksOfRecord(report: SessionReportFacts, sessionId: string): Finding[] {
  return looks(report, sessionId, false);
}

/** Once the diary is written. */
export function looksOfDiary(report: SessionReportFacts, sessionId: string): Finding[] {
  return looks(report, sessionId, true);
}
