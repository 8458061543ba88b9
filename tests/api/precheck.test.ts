// Answers to the pre-check on a real database: stored with their outcome, and whatever they hold stays held.

import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { hashCode } from '@/server/caregiver-code';
import { acceptCaregiver, type Caregiver } from '../support/caregivers';
import { insertCaregiverCode } from '@/db/queries/caregiver';
import { readClearance } from '@/server/features/clearance/read-clearance';
import { issuePermit } from '@/server/features/permit/issue-permit';
import { readPermit } from '@/server/features/permit/read-permit';
import { answerPrecheck } from '@/server/features/precheck/answer-precheck';
import { type Clinic, type Patient } from '../support/clinic';
import { answer, clearAnswers, permitBody, permitFor, readyPatient, openMorning } from '../support/running';

let clinic: Clinic;
let siteId: string;
let oona: AccountActor;

beforeAll(async () => {
  ({ clinic, siteId, oona } = await openMorning());
});
afterAll(() => clinic.close());

const lockoutsOf = (patient: Patient) =>
  clinic.rows(
    { level: z.string(), code: z.string(), until: z.date().nullable() },
    `select level, code, until from lockout where participant_id = $1`,
    [patient.participantId],
  );
const itemsOf = (patient: Patient) =>
  clinic.rows(
    { id: z.string(), level: z.string(), why: z.string(), escalate_at: z.date().nullable() },
    `select id, level, why, escalate_at from worklist_item where participant_id = $1`,
    [patient.participantId],
  );
const mailsAbout = (itemId: string) =>
  clinic.rows(
    { to_email: z.string(), urgent: z.boolean(), facts: z.record(z.string(), z.unknown()) },
    `select to_email, urgent, facts from outbox where key like $1`,
    [`page:${itemId}:%`],
  );

it('stores a clear pre-check as complete, good for 30 minutes, and locks nothing', async () => {
  const { patient } = await readyPatient(clinic, oona, siteId);
  const view = await answer(clinic, patient);
  expect(view).toMatchObject({ complete: true, open: [], outcome: 'go_on', findings: [], emergencyAdvice: false });
  expect(Date.parse(view.expiresAt) - Date.parse(view.answeredAt)).toBe(30 * 60_000);
  expect(await lockoutsOf(patient)).toEqual([]);
  expect(await itemsOf(patient)).toEqual([]);
});

it('lists what is still open and does not count as a pre-check', async () => {
  const { patient } = await readyPatient(clinic, oona, siteId);
  const view = await clinic.call(patient, answerPrecheck, { body: { answers: { seizure: 'no', ready: true } } });
  expect(view).toMatchObject({ complete: false, outcome: null });
  expect(view.open).toContain('faint');
  const clearance = await clinic.call(patient, readClearance, { query: {} });
  expect(clearance.reasons.map(({ code }) => code)).toEqual(['precheck_missing']);
});

it('holds until tomorrow after alcohol, and a second, clear pre-check does not clear that hold', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  expect(await answer(clinic, ready.patient, { drinksLast12h: 3 })).toMatchObject({ outcome: 'hold_tomorrow' });
  expect(await lockoutsOf(ready.patient)).toMatchObject([
    { level: 'hold', code: 'precheck_alcohol', until: expect.any(Date) },
  ]);
  const second = await answer(clinic, ready.patient);
  const refusal = await clinic.refused(ready.patient, issuePermit, {
    body: permitBody(ready, second.id),
    key: 'after-alcohol',
  });
  expect(refusal.reasons?.map(({ code }) => code)).toEqual(['lockout_hold']);
  expect(await itemsOf(ready.patient)).toEqual([]);
});

it('opens a review lockout and a row for staff after sore skin, without paging anybody', async () => {
  const { patient } = await readyPatient(clinic, oona, siteId);
  await answer(clinic, patient, { skin: 'sore' });
  expect(await lockoutsOf(patient)).toMatchObject([{ level: 'review', code: 'precheck_skin_not_ok', until: null }]);
  const [item] = await itemsOf(patient);
  expect(item).toMatchObject({ level: 'review', why: 'precheck_skin_not_ok', escalate_at: null });
  expect(await mailsAbout(item?.id ?? '')).toEqual([]);
});

it('gives emergency advice, opens a safety lockout, pages the first contact and voids a live permit', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const permit = await permitFor(clinic, ready);
  const view = await clinic.call(ready.patient, answerPrecheck, {
    body: { answers: { mood: ['self_harm_thoughts'] } },
  });
  expect(view).toMatchObject({ complete: false, emergencyAdvice: true });
  expect(await lockoutsOf(ready.patient)).toMatchObject([{ level: 'safety', code: 'precheck_self_harm_thoughts' }]);
  const [item] = await itemsOf(ready.patient);
  expect((item?.escalate_at?.getTime() ?? 0) - Date.parse(view.answeredAt)).toBe(30 * 60_000);
  const [page] = await mailsAbout(item?.id ?? '');
  expect(page).toMatchObject({
    to_email: 'oncall@harrowmere.example',
    urgent: true,
    facts: { code: ready.patient.code, path: '/worklist' },
  });
  expect(JSON.stringify(page?.facts)).not.toMatch(/harm|mood|lockout|stimul/i);
  const after = await clinic.call(ready.patient, readPermit, { params: { permitId: permit.id } });
  expect(after).toMatchObject({ state: 'void', voidedBy: 'lockout' });
});

it('shows a new medicine to staff and goes on', async () => {
  const { patient } = await readyPatient(clinic, oona, siteId);
  expect(await answer(clinic, patient, { newMedicine: 'other' })).toMatchObject({ complete: true, outcome: 'caution' });
  expect(await itemsOf(patient)).toMatchObject([{ level: 'look', why: 'precheck_new_medicine' }]);
  expect(await lockoutsOf(patient)).toEqual([]);
});

it('opens the same safety lockout once, however often it is said while it stands', async () => {
  const { patient } = await readyPatient(clinic, oona, siteId);
  await answer(clinic, patient, { faint: 'today' });
  await answer(clinic, patient, { faint: 'today' });
  expect(await lockoutsOf(patient)).toHaveLength(1);
  expect(await itemsOf(patient)).toHaveLength(1);
});

describe('with a helper', () => {
  let helper: Caregiver;
  let patient: Patient;

  beforeAll(async () => {
    ({ patient } = await readyPatient(clinic, oona, siteId));
    helper = await acceptCaregiver(clinic, patient, 'Tam Marlow');
    await insertCaregiverCode(clinic.client.db, {
      id: crypto.randomUUID(),
      accountId: helper.accountId,
      codeHash: await hashCode('042042'),
      createdAt: await clinic.now(),
    });
  });

  it('believes in a helper only by the helper’s own code', async () => {
    const said = await answer(clinic, patient, { helperPresent: true });
    const shown = await answer(clinic, patient, {}, '042042');
    const rows = await clinic.rows(
      { id: z.string(), helper_present: z.boolean() },
      `select id, helper_present from precheck where id = any($1)`,
      [[said.id, shown.id]],
    );
    expect(new Map(rows.map((row) => [row.id, row.helper_present]))).toEqual(
      new Map([
        [said.id, false],
        [shown.id, true],
      ]),
    );
  });

  it('refuses a wrong code and stores nothing', async () => {
    const before = await clinic.rows({ n: z.number() }, `select count(*)::int n from precheck`);
    const refusal = await clinic.refused(patient, answerPrecheck, {
      body: { answers: clearAnswers, helperCode: '000000' },
    });
    expect(refusal).toMatchObject({ status: 409, code: 'precheck.helper_code_wrong' });
    expect(await clinic.rows({ n: z.number() }, `select count(*)::int n from precheck`)).toEqual(before);
  });
});

it('refuses somebody who has no course', async () => {
  const patient = await clinic.patient('No Course', siteId);
  expect(await clinic.refused(patient, answerPrecheck, { body: { answers: clearAnswers } })).toMatchObject({
    code: 'course.none',
  });
});
