// Scheduled work on a real database: what is missed, reminded, expired, escalated, ended; each once however often it runs, and in words that
// give nothing away.

import { z } from 'zod';
import type { AccountActor, Job } from '@/server/action';
import { claimItem } from '@/server/features/worklist/claim-item';
import { stopMails } from '@/server/features/account/stop-mails';
import { pauseCourse } from '@/server/features/course/pause-course';
import { endHolds } from '@/server/features/lockout/end-holds';
import { escalatePages } from '@/server/features/lockout/escalate-pages';
import { expirePermits } from '@/server/features/permit/expire-permits';
import { answerPrecheck } from '@/server/features/precheck/answer-precheck';
import { markMissed } from '@/server/features/session/mark-missed';
import { remind } from '@/server/features/session/remind';
import { renderMail } from '@/server/mail/render-mail';
import { hashOfMailToken } from '@/server/invitation';
import { localMoment } from '@/shared/values/zone';
import { acceptCaregiver } from '../support/caregivers';
import { openClinic, type Clinic, type Patient } from '../support/clinic';
import {
  answer,
  goToMorning,
  numbered,
  permitFor,
  quietDiary,
  readyPatient,
  runSession,
  runUpTo,
  send,
  zone,
  type ReadyPatient,
} from '../support/running';

let clinic: Clinic;
let siteId: string;
let oona: AccountActor;

beforeAll(async () => {
  clinic = await openClinic();
  siteId = await clinic.site('LS');
  oona = await clinic.staff('Oona Feld', 'clinician', siteId);
});
beforeEach(() => goToMorning(clinic));
afterAll(() => clinic.close());

const daytime = { schedule: { hoursFrom: '09:00', hoursTo: '20:00' } };
const newReady = () => readyPatient(clinic, oona, siteId, daytime);
const day = 86_400;

/** What is due of this person's: other tests' people are left alone. */
async function run(job: Job, ids: readonly string[]): Promise<string[]> {
  const due = (await job.listDue(clinic.client.db, await clinic.now())).filter((id) => ids.includes(id));
  for (const id of due) await clinic.transact.job(job, id);
  return due;
}
const plannedOf = (patient: Patient) =>
  clinic.rows(
    { id: z.string(), closed_why: z.string().nullable(), replaces_id: z.string().nullable(), window_from: z.date() },
    `select id, closed_why, replaces_id, window_from from planned_session where participant_id = $1 order by window_from, created_at`,
    [patient.participantId],
  );
const idsOf = async (patient: Patient) => (await plannedOf(patient)).map(({ id }) => id);
const statesOf = async (patient: Patient) => (await plannedOf(patient)).flatMap(({ closed_why }) => closed_why ?? []);
const mailsTo = (email: string) =>
  clinic.rows(
    {
      kind: z.string(),
      due_at: z.date(),
      drop_at: z.date().nullable(),
      facts: z.record(z.string(), z.unknown()),
      key: z.string(),
    },
    `select kind, due_at, drop_at, facts, key from outbox where to_email = $1 and kind <> 'something_to_confirm' order by created_at, key`,
    [email],
  );
const itemsOf = (patient: Patient) =>
  clinic.rows(
    { id: z.string(), level: z.string(), why: z.string() },
    `select id, level, why from worklist_item where participant_id = $1 and closed_at is null order by why`,
    [patient.participantId],
  );

async function miss(ready: ReadyPatient): Promise<void> {
  await clinic.advance(day);
  await run(markMissed, await idsOf(ready.patient));
}

describe('a missed session', () => {
  it('is marked once the window has closed, not before, made up at the end, and nudged about in the morning', async () => {
    const { patient } = await newReady();
    const [first] = await plannedOf(patient);
    await clinic.advance(9 * 3600);
    expect(await run(markMissed, await idsOf(patient))).toEqual([]);
    await clinic.advance(2 * 3600);
    expect(await run(markMissed, await idsOf(patient))).toEqual([first?.id]);
    const rows = await plannedOf(patient);
    expect(rows.map(({ closed_why }) => closed_why).slice(0, 2)).toEqual(['missed', null]);
    expect(rows).toHaveLength(21);
    expect(rows.at(-1)?.replaces_id).toBe(first?.id);
    const [nudge] = await mailsTo(patient.email);
    expect(nudge?.kind).toBe('missed_nudge');
    expect(localMoment(nudge?.due_at.getTime() ?? 0, zone).time).toBe('08:00:00');
    expect((nudge?.drop_at?.getTime() ?? 0) - (nudge?.due_at.getTime() ?? 0)).toBe(24 * 3_600_000);
  });

  it('is marked once when two runs race, with one mail to each', async () => {
    const { patient } = await newReady();
    const helper = await acceptCaregiver(clinic, patient, 'Tam Marlow');
    await clinic.advance(11 * 3600);
    const [first] = await idsOf(patient);
    await Promise.all([1, 2, 3].map(() => clinic.transact.job(markMissed, first ?? '')));
    await clinic.transact.job(markMissed, first ?? '');
    expect(await statesOf(patient)).toEqual(['missed']);
    expect(await mailsTo(patient.email)).toHaveLength(1);
    expect(await mailsTo(helper.email)).toHaveLength(1);
    const [entries] = await clinic.rows(
      { n: z.number() },
      `select count(*)::int n from audit_entry where participant_id = $1 and action = 'session.mark-missed'`,
      [patient.participantId],
    );
    expect(entries?.n).toBe(1);
  });

  it('tells the caregiver that something planned was not done, and nothing about what or why', async () => {
    const { patient } = await newReady();
    const helper = await acceptCaregiver(clinic, patient, 'Tam Marlow');
    await clinic.advance(11 * 3600);
    await run(markMissed, await idsOf(patient));
    const [mail] = await mailsTo(helper.email);
    expect(mail?.facts).toEqual({
      name: 'Tam Marlow',
      participantName: 'Ines',
      path: '/sign-in',
      stopPath: `/stop-mails#token=${helper.stopToken}`,
    });
    const [row] = await clinic.rows({ id: z.string() }, `select id from outbox where key = $1`, [mail?.key]);
    expect(row).toBeDefined();
    const { subject, text, html } = renderMail(
      { ...JSON.parse('{}'), kind: 'caregiver_missed', language: 'en', facts: mail?.facts },
      'http://127.0.0.1:8080',
    );
    const words =
      /session|stimul|current|electrode|\bmA\b|dose|treat|therap|tdcs|tes\b|brain|mood|pain|depress|fatigue|clinic|medic|health|prescri|course|device|symptom|headache|patient|Marlow,? was|Lantern|site/i;
    expect(`${subject} ${text} ${html.replace(/<[^>]*>/g, ' ')}`).not.toMatch(words);
    expect(text).toContain('http://127.0.0.1:8080/sign-in');
    expect(text).toContain(`http://127.0.0.1:8080/stop-mails#token=${helper.stopToken}`);
  });

  it('is told to no caregiver who may not know, who was removed, or who stopped these mails', async () => {
    const { patient } = await newReady();
    const [silent, stopped, told] = [
      await acceptCaregiver(clinic, patient, 'Not Told', false),
      await acceptCaregiver(clinic, patient, 'Has Stopped'),
      await acceptCaregiver(clinic, patient, 'Is Told'),
    ];
    expect(hashOfMailToken(stopped.stopToken)).toHaveLength(64);
    await clinic.call(stopped, stopMails, { body: { token: stopped.stopToken } });
    await clinic.advance(11 * 3600);
    await run(markMissed, await idsOf(patient));
    expect(await mailsTo(silent.email)).toEqual([]);
    expect(await mailsTo(stopped.email)).toEqual([]);
    expect(await mailsTo(told.email)).toHaveLength(1);
  });

  it('reaches the worklist as three in a row, once', async () => {
    const ready = await newReady();
    await miss(ready);
    await miss(ready);
    expect((await itemsOf(ready.patient)).map(({ why }) => why)).toEqual([]);
    await miss(ready);
    await miss(ready);
    expect(await itemsOf(ready.patient)).toMatchObject([{ level: 'flag', why: 'missed_three' }]);
  });

  it('is excused, without a mail or a made-up session, when the person was held all through the window', async () => {
    const ready = await newReady();
    await clinic.call(oona, pauseCourse, {
      params: { courseId: ready.courseId },
      body: { paused: true, reason: 'Away' },
    });
    await miss(ready);
    await miss(ready);
    expect((await statesOf(ready.patient)).slice(1)).toEqual(['excused']);
    expect(await mailsTo(ready.patient.email)).toEqual([]);
  });

  it('is not marked while a session of it runs, nor when it was done', async () => {
    const ready = await newReady();
    await quietDiary(clinic, ready.patient, await runSession(clinic, ready));
    await clinic.advance(day - 1300);
    const permit = await permitFor(clinic, ready);
    await clinic.advance(120);
    await send(clinic, ready.patient, permit, numbered(runUpTo(permit, 59)));
    await clinic.advance(11 * 3600);
    await run(markMissed, await idsOf(ready.patient));
    expect(await statesOf(ready.patient)).toEqual(['done']);
  });
});

describe('a reminder', () => {
  it('goes out once a planned session, when its window opens, and is stale when it closes', async () => {
    const { patient } = await newReady();
    const [first] = await idsOf(patient);
    expect(await run(remind, await idsOf(patient))).toEqual([first]);
    expect(await run(remind, await idsOf(patient))).toEqual([]);
    const [mail] = await mailsTo(patient.email);
    expect(mail).toMatchObject({ kind: 'planned_reminder', facts: { name: 'Ines Marlow', path: '/today' } });
    expect(localMoment(mail?.drop_at?.getTime() ?? 0, zone).time).toBe('20:00:00');
  });

  it('does not go to somebody who is held', async () => {
    const { patient } = await newReady();
    await answer(clinic, patient, { skin: 'sore' });
    expect(await run(remind, await idsOf(patient))).toEqual([]);
  });
});

describe('a permit that is over', () => {
  it('is closed, its session stays reserved, and staff are asked what became of it', async () => {
    const ready = await newReady();
    const permit = await permitFor(clinic, ready);
    expect(await run(expirePermits, [permit.id])).toEqual([]);
    await clinic.advance(30 * 60);
    expect(await run(expirePermits, [permit.id])).toEqual([permit.id]);
    expect(await run(expirePermits, [permit.id])).toEqual([]);
    const [row] = await clinic.rows(
      { closed_why: z.string(), session: z.null() },
      `select p.closed_why, s.closed_at as session from permit p join session s on s.permit_id = p.id where p.id = $1`,
      [permit.id],
    );
    expect(row).toEqual({ closed_why: 'expired', session: null });
    expect(await itemsOf(ready.patient)).toMatchObject([{ level: 'flag', why: 'permit_no_word' }]);
  });

  it('leaves the list when the stimulator says that it never ran', async () => {
    const ready = await newReady();
    const permit = await permitFor(clinic, ready);
    await clinic.advance(31 * 60);
    await run(expirePermits, [permit.id]);
    await send(
      clinic,
      ready.patient,
      permit,
      numbered([
        { kind: 'ended', atSeconds: 0, reason: 'permit_void', onSeconds: 0, chargeCoulomb: 0, lastSequence: 0 },
      ]),
    );
    expect(await itemsOf(ready.patient)).toEqual([]);
  });
});

describe('a page', () => {
  it('goes on after 30 and 60 minutes and every 30 minutes, until somebody takes the row', async () => {
    const { patient } = await newReady();
    await clinic.call(patient, answerPrecheck, { body: { answers: { faint: 'today' } } });
    const [item] = await itemsOf(patient);
    const ids = [item?.id ?? ''];
    const pages = async () =>
      (
        await clinic.rows({ n: z.number() }, `select count(*)::int n from outbox where key like $1`, [
          `page:${ids[0]}:%`,
        ])
      )[0]?.n;
    expect([await run(escalatePages, ids), await pages()]).toEqual([[], 1]);
    for (const told of [2, 3, 4]) {
      await clinic.advance(30 * 60);
      await run(escalatePages, ids);
      await run(escalatePages, ids);
      expect(await pages()).toBe(told);
    }
    await clinic.call(oona, claimItem, { params: { itemId: ids[0] ?? '' }, body: { claim: true } });
    await clinic.advance(30 * 60);
    expect([await run(escalatePages, ids), await pages()]).toEqual([[], 4]);
  });
});

describe('a hold', () => {
  it('ends at its instant and not before, and a safety lockout never', async () => {
    const { patient } = await newReady();
    await answer(clinic, patient, { drinksLast12h: 4, faint: 'today' });
    const open = () =>
      clinic.rows(
        { id: z.string(), level: z.string() },
        `select id, level from lockout where participant_id = $1 and closed_at is null order by level`,
        [patient.participantId],
      );
    const ids = (await open()).map(({ id }) => id);
    expect(ids).toHaveLength(2);
    await clinic.advance(8 * 3600);
    expect(await run(endHolds, ids)).toEqual([]);
    await clinic.advance(8 * 3600);
    await run(endHolds, ids);
    expect((await open()).map(({ level }) => level)).toEqual(['safety']);
  });
});

it('names for every job when it is next due, and nothing that is done', async () => {
  for (const job of [markMissed, remind, expirePermits, escalatePages, endHolds]) {
    const due = await job.nextDue(clinic.client.db);
    if (due !== null) expect(Number.isNaN(Date.parse(due))).toBe(false);
  }
  expect(await expirePermits.nextDue(clinic.client.db)).toBeNull();
  const permit = await permitFor(clinic, await newReady());
  expect(Date.parse((await expirePermits.nextDue(clinic.client.db)) ?? '')).toBe(Date.parse(permit.expiresAt));
});
