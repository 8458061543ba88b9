// When a course is over: its count is done, or nothing is planned any more and what was missed is not made up.

export type CourseEndFacts = {
  readonly sessionsTotal: number;
  readonly sessionsDone: number;
  /** Planned sessions that are still open. */
  readonly sessionsOpen: number;
  readonly makesUpMissed: boolean;
};

export function courseHasEnded(facts: CourseEndFacts): boolean {
  if (facts.sessionsDone >= facts.sessionsTotal) return true;
  return !facts.makesUpMissed && facts.sessionsOpen === 0;
}
