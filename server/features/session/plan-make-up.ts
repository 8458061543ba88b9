// A missed session is added after the last planned one, where the prescription says so and its end leaves room. Decides no window itself.

import type { Db } from '@/db/client';
import { insertPlanned, listPlannedRows, type PlannedRecord } from '@/db/queries/course-plan';
import { findPersonToTell } from '@/db/queries/notice';
import { findPrescriptionInForce } from '@/db/queries/prescription';
import { windowAfter } from '@/shared/rules/schedule';

/** The id of the new row; null when nothing is made up. */
export async function planMakeUp(db: Db, missed: PlannedRecord, now: string): Promise<string | null> {
  const { courseId, participantId } = missed;
  const prescription = await findPrescriptionInForce(db, courseId);
  const person = await findPersonToTell(db, participantId);
  if (!prescription?.schedule.makeUpMissed || !person) return null;
  const { schedule, expiresAt, id: prescriptionId } = prescription;
  const rows = await listPlannedRows(db, courseId);
  const last = rows.filter(({ state }) => state !== 'cancelled' && state !== 'moved').at(-1);
  // A course of which all windows have passed goes on from now, not from its last window.
  const lastFrom = last && last.windowFrom > now ? last.windowFrom : now;
  const window = windowAfter({ ...schedule, zone: person.zone, expiresAt }, lastFrom);
  if (window === null) return null;
  const id = crypto.randomUUID();
  await insertPlanned(db, [
    { id, courseId, participantId, prescriptionId, ...window, replacesId: missed.id, createdAt: now },
  ]);
  return id;
}
