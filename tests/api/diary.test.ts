// Diaries on a real database: written once, after the end, and what they say locks in the same transaction.

import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { listDiary } from '@/server/features/diary/list-diary';
import { writeDiary } from '@/server/features/diary/write-diary';
import { readSession } from '@/server/features/session/read-session';
import type { PermitView } from '@/shared/contracts/permit';
import type { DiaryAnswers, NextDayAnswers } from '@/shared/rules/lockout';
import { type Clinic, type Patient } from '../support/clinic';
import { permitFor, readyPatient, runSession, type ReadyPatient, openMorning } from '../support/running';

let clinic: Clinic;
let siteId: string;
let oona: AccountActor;

beforeAll(async () => {
  ({ clinic, siteId, oona } = await openMorning());
});
afterAll(() => clinic.close());

const nothing: DiaryAnswers = { nothingFelt: true, effects: [], headacheAfter: 0, skin: 'ok', redFlags: [] };
const felt = (kind: 'tingling' | 'headache', strength: number): Partial<DiaryAnswers> => ({
  nothingFelt: false,
  effects: [{ kind, strength, stillThere: false }],
});

const after = (change: Partial<DiaryAnswers> = {}) => ({ kind: 'after' as const, answers: { ...nothing, ...change } });
const nextDay = (change: Partial<NextDayAnswers> = {}) => ({
  kind: 'next_day' as const,
  answers: { rednessStillThere: false, headacheNextDay: 0, ...change },
});
const write = (who: Patient, permit: PermitView, body: ReturnType<typeof after> | ReturnType<typeof nextDay>) =>
  clinic.call(who, writeDiary, { params: { sessionId: permit.sessionId }, body });
const lockoutsOf = (patient: Patient) =>
  clinic.rows(
    { level: z.string(), code: z.string() },
    `select level, code from lockout where participant_id = $1 order by code`,
    [patient.participantId],
  );
const itemsOf = (patient: Patient) =>
  clinic.rows(
    { level: z.string(), why: z.string(), facts: z.record(z.string(), z.unknown()) },
    `select level, why, facts from worklist_item where participant_id = $1 order by why`,
    [patient.participantId],
  );

async function ran(): Promise<{ ready: ReadyPatient; patient: Patient; permit: PermitView }> {
  const ready = await readyPatient(clinic, oona, siteId);
  return { ready, patient: ready.patient, permit: await runSession(clinic, ready) };
}

it('keeps what was felt, shows the first session to staff, and locks nothing', async () => {
  const { patient, permit } = await ran();
  const view = await write(patient, permit, after({ ...felt('tingling', 3), freeText: 'A little warm.' }));
  expect(view).toMatchObject({
    kind: 'after',
    lockouts: [],
    emergencyAdvice: false,
    after: { freeText: 'A little warm.' },
  });
  expect(await lockoutsOf(patient)).toEqual([]);
  expect(await itemsOf(patient)).toMatchObject([{ level: 'look', why: 'first_session' }]);
});

it('puts a headache of 4 on the worklist with its strength, and not a word of what was typed', async () => {
  const { patient, permit } = await ran();
  await write(patient, permit, after({ ...felt('headache', 4), headacheAfter: 4, freeText: 'Secret words' }));
  const items = await itemsOf(patient);
  expect(items).toMatchObject([
    { level: 'look', why: 'strong_effect', facts: { effect: 'headache', strength: 4, number: 1 } },
  ]);
  expect(JSON.stringify(items)).not.toContain('Secret');
});

it('locks for safety after broken skin, gives the advice first and pages', async () => {
  const { patient, permit } = await ran();
  expect(await write(patient, permit, after({ skin: 'broken_or_blistered' }))).toMatchObject({
    emergencyAdvice: true,
    lockouts: [{ code: 'burn_or_blister', level: 'safety' }],
  });
  expect(await lockoutsOf(patient)).toEqual([{ level: 'safety', code: 'burn_or_blister' }]);
  const [mails] = await clinic.rows(
    { n: z.number() },
    `select count(*)::int n from outbox where kind = 'page' and facts ->> 'code' = $1`,
    [patient.code],
  );
  expect(mails?.n).toBe(1);
});

it('voids a live permit by what the next day’s page tells', async () => {
  const { ready, patient, permit } = await ran();
  await write(patient, permit, after());
  await clinic.advance(86_400);
  const live = await permitFor(clinic, ready);
  await write(patient, permit, nextDay({ rednessStillThere: true }));
  expect(await lockoutsOf(patient)).toEqual([{ level: 'review', code: 'skin_next_day' }]);
  const [row] = await clinic.rows({ closed_why: z.string() }, `select closed_why from permit where id = $1`, [live.id]);
  expect(row?.closed_why).toBe('void_lockout');
});

it('holds for review when three headaches running rise to 3', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  for (const strength of [1, 2, 3]) {
    const permit = await runSession(clinic, ready);
    await write(ready.patient, permit, after({ headacheAfter: strength }));
    expect(await lockoutsOf(ready.patient)).toEqual(
      strength === 3 ? [{ level: 'review', code: 'headache_rising' }] : [],
    );
    await clinic.advance(86_400);
  }
});

it('asks staff to look when a photo was offered and has not come by the next day', async () => {
  const { patient, permit } = await ran();
  await write(patient, permit, after({ skin: 'red', photoOffered: true }));
  await clinic.advance(86_400);
  await write(patient, permit, nextDay());
  expect(await lockoutsOf(patient)).toEqual([{ level: 'review', code: 'photo_missing' }]);
});

it('keeps the first page and refuses a second', async () => {
  const { patient, permit } = await ran();
  await write(patient, permit, after());
  const second = await clinic.refused(patient, writeDiary, {
    params: { sessionId: permit.sessionId },
    body: after({ headacheAfter: 9 }),
  });
  expect(second).toMatchObject({ status: 409, code: 'diary.already_written' });
  expect(
    (await clinic.call(patient, readSession, { params: { sessionId: permit.sessionId } })).diary?.after?.headacheAfter,
  ).toBe(0);
});

it('refuses a diary before the session has ended, and anybody else’s', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const permit = await permitFor(clinic, ready);
  const given = { params: { sessionId: permit.sessionId }, body: after() };
  expect(await clinic.refused(ready.patient, writeDiary, given)).toMatchObject({
    status: 409,
    code: 'session.not_ended',
  });
  const other = await clinic.patient('Somebody Else', siteId);
  expect(await clinic.refused(other, writeDiary, given)).toMatchObject({ status: 404 });
});

it('lists own sessions newest first, asks for the next day from the following day on and not for ever, and turns pages', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const first = await runSession(clinic, ready);
  await write(ready.patient, first, after(felt('tingling', 2)));
  const dueOf = async () =>
    (await clinic.call(ready.patient, listDiary, { query: {} })).items.map(({ nextDayDue }) => nextDayDue);
  expect(await dueOf()).toEqual([false]);
  await clinic.advance(86_400);
  expect(await dueOf()).toEqual([true]);
  const second = await runSession(clinic, ready);
  const page = await clinic.call(ready.patient, listDiary, { query: { limit: 1 } });
  expect(page.items).toMatchObject([
    { sessionId: second.sessionId, number: 2, diary: null, completeness: 'complete', intensityMilliamp: 2 },
  ]);
  const rest = await clinic.call(ready.patient, listDiary, { query: { limit: 1, cursor: page.nextCursor ?? '' } });
  expect(rest).toMatchObject({
    items: [{ sessionId: first.sessionId, number: 1, diary: { kind: 'after' } }],
    nextCursor: null,
  });
  await clinic.advance(3 * 86_400);
  expect((await dueOf())[1]).toBe(false);
  expect(await clinic.refused(ready.patient, listDiary, { query: { cursor: 'nonsense' } })).toMatchObject({
    status: 422,
    fields: [{ path: 'cursor', code: 'cursor_unknown' }],
  });
});

it('shows a monitor neither words nor photos', async () => {
  const { patient, permit } = await ran();
  await write(patient, permit, after({ freeText: 'Secret words' }));
  const monitor = await clinic.staff('Mo Grey', 'monitor', siteId);
  const seen = await clinic.call(monitor, readSession, { params: { sessionId: permit.sessionId } });
  expect(seen.diary?.after).toMatchObject({ headacheAfter: 0 });
  expect(JSON.stringify(seen)).not.toContain('Secret');
});
