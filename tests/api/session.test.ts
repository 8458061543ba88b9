// The record of a session on a real database: each event once, in any order, at any delay; what the run shows acts at once; what was delivered
// is the server's own sum.

import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { pauseCourse } from '@/server/features/course/pause-course';
import { readPermit } from '@/server/features/permit/read-permit';
import { readSession } from '@/server/features/session/read-session';
import { sendEvents } from '@/server/features/session/send-events';
import type { PermitView, SessionEvent } from '@/shared/contracts/permit';
import { type Clinic, type Patient } from '../support/clinic';
import {
  answer,
  numbered,
  permitFor,
  quietDiary,
  readyPatient,
  runSession,
  runUpTo,
  samplesOf,
  send,
  wholeRun,
  type ReadyPatient,
  openMorning,
} from '../support/running';

let clinic: Clinic;
let siteId: string;
let oona: AccountActor;

beforeAll(async () => {
  ({ clinic, siteId, oona } = await openMorning());
});
afterAll(() => clinic.close());

const read = (who: AccountActor, sessionId: string) => clinic.call(who, readSession, { params: { sessionId } });
const itemsOf = (patient: Patient) =>
  clinic.rows(
    { level: z.string(), why: z.string() },
    `select level, why from worklist_item where participant_id = $1 and closed_at is null order by opened_at`,
    [patient.participantId],
  );
const lockoutsOf = (patient: Patient) =>
  clinic.rows(
    { level: z.string(), code: z.string() },
    `select level, code from lockout where participant_id = $1 order by code`,
    [patient.participantId],
  );

/** A permit on which time enough has passed for a whole run. */
async function later(ready: ReadyPatient): Promise<PermitView> {
  const permit = await permitFor(clinic, ready);
  await clinic.advance(1300);
  return permit;
}

const newReady = () => readyPatient(clinic, oona, siteId);

it('computes what was delivered from the samples and never from the device’s own sum', async () => {
  const ready = await newReady();
  const permit = await later(ready);
  expect(await send(clinic, ready.patient, permit, wholeRun(permit))).toMatchObject({
    sessionState: 'closed',
    missing: [],
    refused: [],
    permit: { state: 'used', rampDown: false },
  });
  const session = await read(ready.patient, permit.sessionId);
  expect(session.delivered?.chargeCoulomb).toBeCloseTo(2.46, 3);
  expect(session).toMatchObject({
    state: 'closed',
    endReason: 'complete',
    number: 1,
    of: 20,
    delivered: { completeness: 'complete', gaps: [], conflicts: 0 },
    contact: [
      { position: 'F3', worstKiloohm: 6.4, lastKiloohm: 6.4 },
      { position: 'Fp2', worstKiloohm: 7.5, lastKiloohm: 7.5 },
    ],
  });
  expect(session.delivered?.minutes).toBeCloseTo(21, 1);
  expect(session.curve.length).toBeLessThanOrEqual(400);
  expect(session.nextFrom).not.toBeNull();
  const [planned] = await clinic.rows(
    { closed_why: z.string() },
    `select p.closed_why from planned_session p join session s on s.planned_session_id = p.id where s.id = $1`,
    [permit.sessionId],
  );
  expect(planned?.closed_why).toBe('done');
});

it('keeps each event once when everything is sent twice, and says so', async () => {
  const ready = await newReady();
  const permit = await later(ready);
  const events = wholeRun(permit);
  await send(clinic, ready.patient, permit, events);
  const again = await send(clinic, ready.patient, permit, events);
  expect(again.stored).toEqual([]);
  expect(new Set(again.known)).toEqual(new Set(events.map(({ id }) => id)));
  const [kept] = await clinic.rows(
    { n: z.number() },
    `select count(*)::int n from session_event where session_id = $1`,
    [permit.sessionId],
  );
  expect(kept?.n).toBe(events.length);
});

it('comes to the same sum when the events arrive backwards, one by one, the end first', async () => {
  const ready = await newReady();
  const permit = await later(ready);
  const events = wholeRun(permit).reverse();
  const states: string[] = [];
  for (const event of events) states.push((await send(clinic, ready.patient, permit, [event])).sessionState);
  expect(new Set(states.slice(0, -1))).toEqual(new Set(['awaiting_record']));
  expect(states.at(-1)).toBe('closed');
  expect((await read(ready.patient, permit.sessionId)).delivered?.chargeCoulomb).toBeCloseTo(2.46, 3);
});

it('shows a missing number as missing, and keeps the whole dose reserved until it comes', async () => {
  const ready = await newReady();
  const permit = await later(ready);
  const events = wholeRun(permit);
  const held = events[5];
  if (!held) throw new Error('no event');
  expect(
    await send(
      clinic,
      ready.patient,
      permit,
      events.filter((event) => event !== held),
    ),
  ).toMatchObject({ sessionState: 'awaiting_record', missing: [5] });
  expect(await read(ready.patient, permit.sessionId)).toMatchObject({
    state: 'awaiting_record',
    delivered: null,
    missingSequences: [5],
  });
  expect(await send(clinic, ready.patient, permit, [held])).toMatchObject({ sessionState: 'closed', missing: [] });
});

it('counts a gap in the samples at the planned current in the upper figure only', async () => {
  const ready = await newReady();
  const permit = await later(ready);
  const gone: [number, number] = [300, 420];
  const events = wholeRun(permit).map((event): SessionEvent =>
    event.kind === 'samples'
      ? { ...event, samples: event.samples.filter(([second]) => second <= gone[0] || second >= gone[1]) }
      : event,
  );
  await send(
    clinic,
    ready.patient,
    permit,
    events
      .filter((event) => event.kind !== 'samples' || event.samples.length > 0)
      .map((event, sequence) =>
        event.kind === 'ended' ? { ...event, sequence, lastSequence: sequence } : { ...event, sequence },
      ),
  );
  const { delivered } = await read(ready.patient, permit.sessionId);
  expect(delivered?.gaps).toEqual([{ fromSeconds: 300, toSeconds: 420 }]);
  expect(delivered?.chargeCoulomb).toBeCloseTo(2.22, 3);
  expect(delivered?.upperChargeCoulomb).toBeCloseTo(2.46, 3);
});

it('refuses an event from the future by its field, and keeps nothing of it', async () => {
  const ready = await newReady();
  const permit = await permitFor(clinic, ready);
  await clinic.advance(30);
  const ahead = numbered([{ kind: 'sensation', atSeconds: 600, sensation: 'tingling', strength: 3 }]);
  const refusal = await clinic.refused(ready.patient, sendEvents, {
    params: { permitId: permit.id },
    body: { events: ahead },
  });
  expect(refusal).toMatchObject({
    status: 422,
    fields: [{ path: 'events.0.atSeconds', code: 'event_from_the_future' }],
  });
  const hidden = numbered([
    {
      kind: 'samples',
      atSeconds: 1,
      samples: [
        [1, 0.1],
        [900, 2],
      ],
      impedance: [],
    },
  ]);
  expect(
    await clinic.refused(ready.patient, sendEvents, { params: { permitId: permit.id }, body: { events: hidden } }),
  ).toMatchObject({ status: 422 });
  const both = [
    ...numbered([{ kind: 'started', atSeconds: 0, counter: permit.counter }]),
    ...ahead.map((event) => ({ ...event, sequence: 1 })),
  ];
  expect(await send(clinic, ready.patient, permit, both)).toMatchObject({
    stored: [both[0]?.id],
    refused: [{ id: both[1]?.id, code: 'from_the_future' }],
  });
});

it('keeps the first of two contents of one event, refuses the second by name, and flags it', async () => {
  const ready = await newReady();
  const permit = await later(ready);
  const [event] = numbered([{ kind: 'sensation', atSeconds: 20, sensation: 'tingling', strength: 3 }]);
  if (event?.kind !== 'sensation') throw new Error('no event');
  await send(clinic, ready.patient, permit, [event]);
  const changed = { ...event, strength: 9 };
  const stolen = { ...event, id: randomUUID() };
  const answered = await send(clinic, ready.patient, permit, [changed, stolen]);
  expect(answered.refused).toEqual([
    { id: event.id, code: 'other_content' },
    { id: stolen.id, code: 'sequence_taken' },
  ]);
  expect((await read(ready.patient, permit.sessionId)).sensations).toEqual([
    { atSeconds: 20, sensation: 'tingling', strength: 3 },
  ]);
  expect(await itemsOf(ready.patient)).toContainEqual({ level: 'flag', why: 'record_conflict' });
});

it('refuses what is numbered after the end', async () => {
  const ready = await newReady();
  const permit = await later(ready);
  const events = wholeRun(permit);
  await send(clinic, ready.patient, permit, events);
  const after = numbered([{ kind: 'sensation', atSeconds: 20, sensation: 'tingling', strength: 3 }], events.length);
  expect(
    await clinic.refused(ready.patient, sendEvents, { params: { permitId: permit.id }, body: { events: after } }),
  ).toMatchObject({
    status: 422,
    fields: [{ code: 'event_after_the_end' }],
  });
});

it('begins the session and uses the permit by the first sample', async () => {
  const ready = await newReady();
  const permit = await permitFor(clinic, ready);
  await clinic.advance(100);
  expect(
    await send(
      clinic,
      ready.patient,
      permit,
      numbered([{ kind: 'contact', atSeconds: 0, position: 'F3', kiloohm: 6, grade: 'good' }]),
    ),
  ).toMatchObject({ sessionState: 'permitted', permit: { state: 'live' } });
  const started = numbered([{ kind: 'samples', atSeconds: 0, samples: samplesOf(2, 0, 40), impedance: [] }], 1);
  expect(await send(clinic, ready.patient, permit, started)).toMatchObject({
    sessionState: 'running',
    permit: { state: 'used', rampDown: false },
  });
  const { startedAt, asOf } = {
    startedAt: (await read(ready.patient, permit.sessionId)).startedAt,
    asOf: await clinic.now(),
  };
  expect((Date.parse(asOf) - Date.parse(String(startedAt))) / 1000).toBeCloseTo(40, -1);
});

it.each([
  ['a red flag', { kind: 'red_flag', atSeconds: 50, flag: 'chest_pain' }, { level: 'safety', code: 'chest_pain' }],
  [
    'pain at a pad of 7',
    { kind: 'sensation', atSeconds: 50, sensation: 'burning', strength: 7 },
    { level: 'review', code: 'pain_high' },
  ],
] as const)(
  'locks at once by %s during the run, and tells the stimulator to ramp down',
  async (_what, said, lockout) => {
    const ready = await newReady();
    const permit = await permitFor(clinic, ready);
    await clinic.advance(120);
    await send(clinic, ready.patient, permit, numbered(runUpTo(permit, 59)));
    const event = numbered([said], 100);
    expect(await send(clinic, ready.patient, permit, event)).toMatchObject({ permit: { rampDown: true } });
    expect(await lockoutsOf(ready.patient)).toEqual([lockout]);
  },
);

it('quarantines a stimulator that gives more than permitted, locks and pages, though the run lies across two batches', async () => {
  const ready = await newReady();
  const permit = await permitFor(clinic, ready);
  await clinic.advance(200);
  const more = (from: number): [number, number][] => [[from, 2.2]];
  // The event in which it begins had begun long before.
  const minute = Array.from({ length: 60 }, (_, second): [number, number] => [second, Math.min(2, second / 15)]);
  const samples = [...minute, ...more(60)];
  await send(clinic, ready.patient, permit, numbered([{ kind: 'samples', atSeconds: 0, samples, impedance: [] }]));
  expect(await lockoutsOf(ready.patient)).toEqual([]);
  await send(
    clinic,
    ready.patient,
    permit,
    numbered([{ kind: 'samples', atSeconds: 61, samples: more(61), impedance: [] }], 1),
  );
  expect(await lockoutsOf(ready.patient)).toEqual([{ level: 'device', code: 'over_current' }]);
  const [device] = await clinic.rows(
    { state: z.string() },
    `select state from device_state where device_id = $1 order by number desc limit 1`,
    [ready.deviceId],
  );
  expect(device?.state).toBe('quarantined');
  const [page] = await clinic.rows(
    { urgent: z.boolean() },
    `select urgent from outbox where kind = 'page' and facts ->> 'code' = $1`,
    [ready.patient.code],
  );
  expect(page?.urgent).toBe(true);
});

it('tells a running stimulator to ramp down when the course is paused meanwhile, and stores what it still sends', async () => {
  const ready = await newReady();
  const permit = await permitFor(clinic, ready);
  await clinic.advance(120);
  await send(clinic, ready.patient, permit, numbered(runUpTo(permit, 59)));
  await clinic.call(oona, pauseCourse, {
    params: { courseId: ready.courseId },
    body: { paused: true, reason: 'Away' },
  });
  const next = numbered([{ kind: 'samples', atSeconds: 60, samples: samplesOf(2, 60, 70), impedance: [] }], 100);
  expect(await send(clinic, ready.patient, permit, next)).toMatchObject({
    stored: [next[0]?.id],
    permit: { state: 'used', rampDown: true },
  });
});

it('keeps and flags what was delivered on a permit that was void before it began', async () => {
  const ready = await newReady();
  const permit = await later(ready);
  await clinic.call(oona, pauseCourse, {
    params: { courseId: ready.courseId },
    body: { paused: true, reason: 'Away' },
  });
  expect(await send(clinic, ready.patient, permit, wholeRun(permit))).toMatchObject({
    refused: [],
    sessionState: 'closed',
    permit: { state: 'void', voidedBy: 'paused' },
  });
  expect(await itemsOf(ready.patient)).toContainEqual({ level: 'flag', why: 'started_on_void_permit' });
  expect((await read(ready.patient, permit.sessionId)).delivered?.completeness).toBe('complete');
});

it('closes a session that was stopped early as partial, and shows it to staff', async () => {
  const ready = await newReady();
  const permit = await runSession(clinic, ready, { endSecond: 700, reason: 'stopped' });
  const session = await read(ready.patient, permit.sessionId);
  expect(session).toMatchObject({ endReason: 'stopped', delivered: { completeness: 'partial' } });
  expect(await itemsOf(ready.patient)).toEqual([{ level: 'look', why: 'stopped_early' }]);
});

it('holds the stimulator after two sessions running that ended by lost contact', async () => {
  const ready = await newReady();
  for (let time = 0; time < 2; time += 1) {
    const permit = await runSession(clinic, ready, { endSecond: 700, reason: 'lost_contact' });
    await quietDiary(clinic, ready.patient, permit);
    if (time === 0) {
      expect(await lockoutsOf(ready.patient)).toEqual([]);
      await clinic.advance(86_400);
    }
  }
  expect(await lockoutsOf(ready.patient)).toEqual([{ level: 'device', code: 'lost_contact_twice' }]);
});

it('finishes the course with its last session', async () => {
  const ready = await readyPatient(clinic, oona, siteId, { schedule: { sessionsTotal: 1 } });
  await runSession(clinic, ready);
  const [course] = await clinic.rows({ closed_why: z.string() }, `select closed_why from course where id = $1`, [
    ready.courseId,
  ]);
  expect(course?.closed_why).toBe('finished');
});

it('takes events of nobody else’s permit, and shows a session to staff of the site alone', async () => {
  const ready = await newReady();
  const permit = await runSession(clinic, ready);
  const other = await clinic.patient('Somebody Else', siteId);
  const events = numbered([{ kind: 'pause', atSeconds: 1 }]);
  expect(await clinic.refused(other, sendEvents, { params: { permitId: permit.id }, body: { events } })).toMatchObject({
    status: 404,
  });
  expect(await clinic.refused(other, readSession, { params: { sessionId: permit.sessionId } })).toMatchObject({
    status: 404,
  });
  expect(await clinic.refused(other, readPermit, { params: { permitId: permit.id } })).toMatchObject({ status: 404 });
  const stranger = await clinic.staff('Odd Man', 'clinician', await clinic.site('MR'));
  expect(await clinic.refused(stranger, readSession, { params: { sessionId: permit.sessionId } })).toMatchObject({
    status: 404,
  });
  expect((await read(oona, permit.sessionId)).id).toBe(permit.sessionId);
  expect(await answer(clinic, ready.patient)).toMatchObject({ complete: true });
});
