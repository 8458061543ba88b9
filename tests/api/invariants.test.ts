// What must be true at every moment is true after a course was played by the real actions, and each of the questions notices when it is not.
import { z } from 'zod';
import { drizzle } from 'drizzle-orm/node-postgres';
import { makeRunner } from '@/server/jobs';
import { checkInvariants } from '@/server/house/check-invariants';
import { writeDiary } from '@/server/features/diary/write-diary';
import type { AccountActor } from '@/server/action';
import { openClinic, type Clinic } from '../support/clinic';
import { pastTheGuards } from '../support/postgres';
import { goToMorning, permitFor, quietDiary, readyPatient, runSession, type ReadyPatient } from '../support/running';

let clinic: Clinic;
let ines: ReadyPatient;

/** Two people through five days: a session each, one stopped early, one missed; on the last day a red flag and a permit in hand. */
beforeAll(async () => {
  clinic = await openClinic();
  await goToMorning(clinic);
  const siteId = await clinic.site('LS');
  const oona: AccountActor = await clinic.staff('Oona Feld', 'clinician', siteId);
  ines = await readyPatient(clinic, oona, siteId);
  const other = await readyPatient(clinic, oona, siteId);
  const runner = makeRunner(clinic.transact, { deliverDue: async () => 0 }, (error) => {
    throw error;
  });
  for (let day = 0; day < 4; day += 1) {
    if (day !== 2) {
      const permit = await runSession(clinic, ines, day === 1 ? { endSecond: 700, reason: 'stopped' as const } : {});
      await quietDiary(clinic, ines.patient, permit);
    }
    if (day === 3) {
      const permit = await runSession(clinic, other);
      const answers = {
        nothingFelt: false,
        effects: [{ kind: 'tingling' as const, strength: 3, stillThere: false }],
        headacheAfter: 0,
        skin: 'ok' as const,
        redFlags: ['seizure' as const],
      };
      await clinic.call(other.patient, writeDiary, {
        params: { sessionId: permit.sessionId },
        body: { kind: 'after', answers },
      });
    }
    await clinic.advance(86_400 - 2_700);
    await runner.runDue();
    await goToMorning(clinic);
    await runner.runDue();
  }
  await permitFor(clinic, ines);
}, 240_000);
afterAll(() => clinic.close());

it('hold after five days of two people, and each had something to look at', async () => {
  const found = await checkInvariants(clinic.client.db, await clinic.now());
  expect(found.map(({ id, broken }) => [id, broken])).toEqual(
    [...Array.from({ length: 12 }, (_, index) => `I${index + 1}`), 'S11'].map((id) => [id, []]),
  );
  expect(found.filter(({ checked }) => checked === 0).map(({ id }) => id)).toEqual(['I11']);
});

/** One thing put wrong past all guards, and which of the questions must notice. */
const wrongs: [string, string, string][] = [
  ['I1', 'a second live permit', `drop index permit_one_live; update permit set closed_at = null, closed_why = null`],
  ['I2', 'more charge than a day may hold', `update session set upper_uc = 14400001 where ended_at is not null`],
  ['I3', 'an event that is gone', `delete from session_event where sequence = 3`],
  ['I4', 'a charge that the events do not bear out', `update session set delivered_uc = delivered_uc - 1`],
  ['I5', 'a pre-check that came after the permit', `update precheck set answered_at = answered_at + interval '1 hour'`],
  ['I5', 'a signature that is gone', `delete from signature where subject_kind = 'prescription'`],
  [
    'I5',
    'a lockout that stood at the time',
    `update lockout set opened_at = opened_at - interval '90 days'; update lockout set closed_at = null; update lockout set participant_id = (select participant_id from permit where closed_at is null)`,
  ],
  ['I6', 'an entry that says something else', `update audit_entry set actor_name = 'Nobody' where sequence = 2`],
  ['I7', 'a page that was not sent', `delete from outbox where kind = 'page'`],
  ['I8', 'a diary that is gone', `delete from diary`],
  ['I8', 'a trigger that is off', `alter table diary disable trigger append_only`],
  [
    'I9',
    'a run that was longer than permitted',
    `update session set on_ms = on_ms + 10000 where completeness = 'complete'`,
  ],
  ['I10', 'one wish with two permits', `drop index permit_key; update permit set key = 'the same'`],
  [
    'I12',
    'a session both missed and done',
    `update planned_session set closed_why = 'missed' where closed_why = 'done'`,
  ],
  ['S11', 'a review or version without its signature', `delete from signature`],
];

it.each(wrongs)('%s notices %s', async (id, _what, sql) => {
  const now = await clinic.now();
  const broken = await pastTheGuards(clinic.client, async (client) => {
    await client.query('begin; set local session_replication_role = replica');
    await client.query(sql);
    const found = await checkInvariants(drizzle(client), now);
    await client.query('rollback');
    return found.filter((each) => each.broken.length > 0).map((each) => each.id);
  });
  expect(broken).toContain(id);
});

it('asks of a record in which nothing was begun nothing that it could break', async () => {
  const empty = await openClinic();
  try {
    const found = await checkInvariants(empty.client.db, await empty.now());
    expect(found.filter(({ broken }) => broken.length > 0)).toEqual([]);
    const [row] = await empty.rows({ n: z.number() }, 'select count(*)::int n from permit');
    expect(row?.n).toBe(0);
  } finally {
    await empty.close();
  }
});
