// What must be true at every moment, whatever happened: I1 to I12, each with how much was looked at and what breaks it. Reads only.

import {
  chargeWithinWindows,
  eachPlannedSessionEndsOnce,
  entriesAsWritten,
  eventsOnceAndWhole,
  nothingDisappeared,
  oneAnswerAKey,
  oneLivePermit,
  pageOfRecordedSessions,
  pagesForRedFlags,
  permitsByTheFacts,
  signedWithThePassword,
  type Counted,
} from '@/db/queries/invariants';
import { findSession, listEventBodies } from '@/db/queries/session';
import type { Db } from '@/db/client';
import { eventsOf } from '@/server/features/session/event-row';
import { verifyAudit } from '@/server/house/verify-audit';
import { ceilings } from '@/shared/rules/ceilings';
import { overCurrent } from '@/shared/rules/delivered';
import { closingOf } from '@/shared/rules/session-closing';
import { samplesOf } from '@/shared/rules/session-summary';
import { microcoulombOf } from '@/shared/values/units';

export interface Invariant extends Counted {
  id: string;
  /** Short, for the line of a report. */
  what: string;
}

const sessionsPage = 100;
/** A device counts in whole steps of its own: as much longer than permitted is no longer hold (own choice). */
const onTimeToleranceMilliseconds = 2000;
/** No step to nothing from above this, in mA (safety rules: 0.5 mA is felt). */
const largestStepToNothingMilliamp = 0.5;
/** Samples further apart than this say nothing of a step. */
const neighbouringSeconds = 1.5;

export async function checkInvariants(db: Db, now: string): Promise<Invariant[]> {
  const { arrival, run } = await readSessions(db);
  const { entries, findings } = await verifyAudit(db);
  const heads = await entriesAsWritten(db);
  const chains = findings.map(({ chain, sequence, what }) => `${chain} ${sequence} ${what}`);
  const windows = {
    dayMicrocoulomb: microcoulombOf(ceilings.charge24hCoulomb.value),
    weekMicrocoulomb: microcoulombOf(ceilings.charge7dCoulomb.value),
  };
  const trail = { checked: entries + heads.checked, broken: [...chains, ...heads.broken] };
  return [
    { id: 'I1', what: 'at most one live permit a participant', ...(await oneLivePermit(db)) },
    { id: 'I2', what: 'charge within every rolling window', ...(await chargeWithinWindows(db, windows)) },
    { id: 'I3', what: 'each event once, whole records without a gap', ...(await eventsOnceAndWhole(db)) },
    { id: 'I4', what: 'the same charge for any order of arrival', ...arrival },
    { id: 'I5', what: 'each permit allowed by the facts as they stood', ...(await permitsByTheFacts(db)) },
    { id: 'I6', what: 'the audit trail verifies, entries as written', ...trail },
    { id: 'I7', what: 'a page for each red flag, and again until answered', ...(await pagesForRedFlags(db, now)) },
    { id: 'I8', what: 'nothing written has disappeared', ...(await nothingDisappeared(db)) },
    { id: 'I9', what: 'current and time within the permit, no step to nothing', ...run },
    { id: 'I10', what: 'one key, one permit, one answer', ...(await oneAnswerAKey(db)) },
    // Arms come with research sites; until then there is nothing that could differ between them.
    { id: 'I11', what: 'blinded answers alike (no arms here)', checked: 0, broken: [] },
    { id: 'I12', what: 'each planned session ends once', ...(await eachPlannedSessionEndsOnce(db, now)) },
    { id: 'S11', what: 'each signed row with the password for its bytes', ...(await signedWithThePassword(db)) },
  ];
}

/** I4 and I9 ask the rules about every session that has a whole record. */
async function readSessions(db: Db): Promise<{ arrival: Counted; run: Counted }> {
  const arrival: Counted = { checked: 0, broken: [] };
  const run: Counted = { checked: 0, broken: [] };
  let after: string | null = null;
  for (;;) {
    const page: Awaited<ReturnType<typeof pageOfRecordedSessions>> = await pageOfRecordedSessions(
      db,
      after,
      sessionsPage,
    );
    for (const stored of page) {
      const session = await findSession(db, stored.id);
      if (!session) continue;
      const events = eventsOf(await listEventBodies(db, stored.id));
      const asStored = closingOf(session.dose, events).row;
      const backwards = closingOf(session.dose, events.toReversed()).row;
      arrival.checked += 1;
      const isSame =
        asStored.deliveredUc === stored.deliveredUc &&
        asStored.upperUc === stored.upperUc &&
        backwards.deliveredUc === stored.deliveredUc &&
        backwards.upperUc === stored.upperUc;
      if (!isSame) arrival.broken.push(stored.id);

      run.checked += 1;
      const samples = samplesOf(events);
      const isTooMuch = overCurrent(samples, session.dose.intensityMilliamp) !== null;
      const isTooLong = (stored.onMs ?? 0) > stored.permitOnMs + onTimeToleranceMilliseconds;
      if (isTooMuch || isTooLong || stepsToNothing(samples)) run.broken.push(stored.id);
    }
    after = page.at(-1)?.id ?? null;
    if (page.length < sessionsPage) return { arrival, run };
  }
}

function stepsToNothing(samples: ReturnType<typeof samplesOf>): boolean {
  const inOrder = [...samples].sort(([a], [b]) => a - b);
  return inOrder.some(([seconds, milliamp], index) => {
    const next = inOrder[index + 1];
    if (!next || milliamp === null || next[1] !== 0 || next[0] - seconds > neighbouringSeconds) return false;
    return Math.abs(milliamp) > largestStepToNothingMilliamp;
  });
}
