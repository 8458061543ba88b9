// "May I start now?" on a real database: allowed only when everything stands, every reason at once, for whoever may ask.

import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { readClearance } from '@/server/features/clearance/read-clearance';
import { pauseCourse } from '@/server/features/course/pause-course';
import { changeDeviceState } from '@/server/features/device/change-device-state';
import { type Clinic, type Patient } from '../support/clinic';
import { sign, write } from '../support/prescribing';
import { makeReady } from '../support/records';
import { answer, permitFor, readyPatient, runSession, openMorning } from '../support/running';

let clinic: Clinic;
let siteId: string;
let oona: AccountActor;

beforeAll(async () => {
  ({ clinic, siteId, oona } = await openMorning());
});
afterAll(() => clinic.close());

const read = (who: AccountActor, courseId?: string) => clinic.call(who, readClearance, { query: { courseId } });
const codesFor = async (patient: Patient) => (await read(patient)).reasons.map(({ code }) => code);

it('lets somebody for whom everything stands go on to the pre-check', async () => {
  const { patient, courseId } = await readyPatient(clinic, oona, siteId);
  const clearance = await read(patient);
  expect(clearance.reasons.map(({ code }) => code)).toEqual(['precheck_missing']);
  expect(clearance).toMatchObject({
    courseId,
    allowed: false,
    readyForPrecheck: true,
    earliestStartAt: null,
    nextSession: { number: 1, of: 20 },
    dose: { intensityMilliamp: 2, holdSeconds: 1200 },
    precheckFacts: { helperAsked: false },
    livePermitId: null,
    diaryDueSessionId: null,
  });
});

it('says that a start is allowed after a clear pre-check, and no longer 30 minutes later', async () => {
  const { patient } = await readyPatient(clinic, oona, siteId);
  const given = await answer(clinic, patient);
  expect(await read(patient)).toMatchObject({ allowed: true, reasons: [], precheck: { id: given.id, complete: true } });
  await clinic.advance(30 * 60);
  expect(await codesFor(patient)).toEqual(['precheck_expired']);
});

it('names every reason at once, each with a sentence and who resolves it, for somebody just enrolled', async () => {
  const patient = await clinic.patient('Just Invited', siteId);
  const clearance = await read(patient);
  expect(clearance.reasons.map(({ code }) => code)).toEqual(
    expect.arrayContaining([
      'consent_missing',
      'screening_incomplete',
      'training_missing',
      'prescription_unsigned',
      'device_unassigned',
    ]),
  );
  expect(clearance).toMatchObject({
    allowed: false,
    readyForPrecheck: false,
    courseId: null,
    nextSession: null,
    dose: null,
  });
  for (const reason of clearance.reasons) expect(reason.sentence).not.toBe('');
  const unsigned = clearance.reasons.find(({ code }) => code === 'prescription_unsigned');
  expect(unsigned).toMatchObject({ resolvedBy: 'clinician', contact: { phone: '020 7946 0100' } });
});

it('wants a signed version read and confirmed before anything else', async () => {
  const patient = await clinic.patient('Ines Marlow', siteId);
  await makeReady(clinic, oona, patient, siteId);
  const version = await sign(clinic, oona, await write(clinic, oona, patient));
  expect(await codesFor(patient)).toContain('prescription_unacknowledged');
  expect((await read(patient)).prescriptionToAcknowledgeId).toBe(version.id);
});

it('refuses on a day that the prescription does not name, until the next window opens', async () => {
  const today = new Date(Date.parse(await clinic.now())).getUTCDay();
  const days = [((today + 1) % 7) + 1];
  const { patient } = await readyPatient(clinic, oona, siteId, { schedule: { days, sessionsTotal: 4 } });
  const { reasons, earliestStartAt, nextSession, readyForPrecheck } = await read(patient);
  const outside = reasons.find(({ code }) => code === 'outside_hours');
  expect(outside?.until).toBe(nextSession?.windowFrom);
  expect(earliestStartAt).toBe(nextSession?.windowFrom);
  expect(readyForPrecheck).toBe(false);
});

it('refuses a paused course and a recalled stimulator, each by its own reason', async () => {
  const { patient, courseId, deviceId } = await readyPatient(clinic, oona, siteId);
  await clinic.call(oona, pauseCourse, { params: { courseId }, body: { paused: true, reason: 'Away' } });
  await clinic.call(oona, changeDeviceState, { params: { deviceId }, body: { state: 'recalled', reason: 'Batch' } });
  expect(await codesFor(patient)).toEqual(['prescription_paused', 'device_recalled', 'precheck_missing']);
});

it('counts a finished session: the gap, the day and the diary stand in the way until the diary is written', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const permit = await runSession(clinic, ready);
  const clearance = await read(ready.patient);
  const until = new Map(clearance.reasons.map((reason) => [reason.code, reason.until]));
  expect([...until.keys()]).toEqual([
    'outside_hours',
    'gap_too_short',
    'day_count_reached',
    'diary_missing',
    'precheck_missing',
  ]);
  expect(clearance).toMatchObject({
    diaryDueSessionId: permit.sessionId,
    openSessionId: null,
    nextSession: { number: 2 },
  });
  expect(Date.parse(String(until.get('gap_too_short'))) - Date.parse(clearance.asOf)).toBeGreaterThan(19 * 3_600_000);
});

it('counts the whole dose of a session whose record is not whole, and says that it is open', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const permit = await permitFor(clinic, ready);
  expect(await codesFor(ready.patient)).toContain('live_permit');
  await clinic.advance(31 * 60);
  const clearance = await read(ready.patient);
  expect(clearance.reasons.map(({ code }) => code)).toEqual(
    expect.arrayContaining(['session_open', 'day_count_reached', 'gap_too_short']),
  );
  expect(clearance).toMatchObject({ openSessionId: permit.sessionId, livePermitId: null });
});

it('is answered to staff of the site and to nobody else, and every look is on record', async () => {
  const { patient, courseId } = await readyPatient(clinic, oona, siteId);
  const monitor = await clinic.staff('Mo Grey', 'monitor', siteId);
  const stranger = await clinic.staff('Odd Man', 'clinician', await clinic.site('MR'));
  expect((await read(monitor, courseId)).participantId).toBe(patient.participantId);
  const other = await clinic.patient('Somebody Else', siteId);
  for (const who of [stranger, other]) {
    expect(await clinic.refused(who, readClearance, { query: { courseId } })).toMatchObject({
      status: 404,
      code: 'not_found',
    });
  }
  expect(await clinic.refused(monitor, readClearance, { query: {} })).toMatchObject({
    status: 422,
    fields: [{ path: 'courseId' }],
  });
  const [looks] = await clinic.rows(
    { n: z.number() },
    `select count(*)::int n from audit_entry where participant_id = $1 and action = 'clearance.read' and kind = 'read' and actor_id = $2`,
    [patient.participantId, monitor.accountId],
  );
  expect(looks?.n).toBe(1);
});

it('asks for a new screening once the old one is over', async () => {
  const { patient } = await readyPatient(clinic, oona, siteId);
  await clinic.advance(90 * 86_400 + 60);
  expect(await codesFor(patient)).toContain('screening_expired');
});
