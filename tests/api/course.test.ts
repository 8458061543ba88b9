// A course: its strip in every state, pausing, moving a session, and its end, on a real database.

import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { insertLockout } from '@/db/queries/lockout';
import { listMarks, listPlanned } from '@/db/queries/course';
import { closePlanned } from '@/db/queries/course-plan';
import { closeCourseIfDone } from '@/server/course-end';
import { pauseCourse } from '@/server/features/course/pause-course';
import { readCourse } from '@/server/features/course/read-course';
import { rescheduleSession } from '@/server/features/course/reschedule-session';
import { withdrawParticipant } from '@/server/features/participant/withdraw-participant';
import { addDays, localDate } from '@/shared/values/zone';
import { openClinic, type Clinic, type Patient } from '../support/clinic';
import { inForce, sign, write } from '../support/prescribing';
import { beginSession, endWithRecord, givePermit, recordSession } from '../support/sessions';

let clinic: Clinic;
let siteId: string;
let oona: AccountActor;
let coordinator: AccountActor;
let stranger: AccountActor;

beforeAll(async () => {
  clinic = await openClinic();
  siteId = await clinic.site('LS');
  oona = await clinic.staff('Oona Feld', 'clinician', siteId);
  coordinator = await clinic.staff('M. Quill', 'coordinator', siteId);
  stranger = await clinic.staff('Odd Man', 'clinician', await clinic.site('MR'));
});
afterAll(() => clinic.close());

const day = 86_400;

async function onCourse(sessionsTotal = 6): Promise<{ patient: Patient; courseId: string; prescriptionId: string }> {
  const patient = await clinic.patient('Maud Ferring', siteId);
  const version = await inForce(clinic, oona, patient, { schedule: { sessionsTotal } });
  return { patient, courseId: version.courseId, prescriptionId: version.id };
}

const read = (courseId: string, who = oona) => clinic.call(who, readCourse, { params: { courseId } });
const statesOf = async (courseId: string) => (await read(courseId)).marks.map(({ state }) => state);

async function lock(patient: Patient, until: string | null = null) {
  const openedAt = await clinic.now();
  const level = until === null ? 'review' : 'hold';
  const lockout = {
    id: randomUUID(),
    participantId: patient.participantId,
    level,
    code: 'headache_high',
    source: 'diary',
    sourceId: null,
    openedAt,
    until,
  } as const;
  await insertLockout(clinic.client.db, lockout);
}

describe('the strip', () => {
  it('shows what was delivered by how much, what was missed, and what comes next', async () => {
    const { patient, courseId } = await onCourse();
    const first = await recordSession(clinic, patient);
    const written = [randomUUID(), first.sessionId, patient.participantId, await clinic.now(), patient.accountId];
    await clinic.client.pool.query(
      `insert into diary (id, session_id, participant_id, kind, answers, headache, emergency_advice, written_at, account_id) values ($1, $2, $3, 'after', '{}', 4, false, $4, $5)`,
      written,
    );
    await clinic.advance(day);
    await recordSession(clinic, patient, 0.4);
    await clinic.advance(2 * day);
    const { marks } = await read(courseId);
    expect(marks.map(({ state, fraction }) => [state, fraction])).toEqual([
      ['delivered', 1],
      ['partial', 0.4],
      ['missed', null],
      ['next', null],
      ['planned', null],
      ['planned', null],
    ]);
    expect(marks[0]).toMatchObject({
      number: 1,
      sessionId: first.sessionId,
      headache: 4,
      deliveredMinutes: 21,
      plannedMinutes: 21,
    });
    expect(marks[3]).toMatchObject({
      number: 4,
      sessionId: null,
      startedAt: null,
      deliveredMinutes: null,
      headache: null,
    });
  });

  it('shows a session under way, and one that is still to do after hardly any current flowed', async () => {
    const { patient, courseId } = await onCourse();
    const begun = await beginSession(clinic, patient);
    expect((await statesOf(courseId))[0]).toBe('running');
    await endWithRecord(clinic, begun, 0.02);
    expect((await statesOf(courseId))[0]).toBe('next');
    await clinic.advance(day);
    expect((await read(courseId)).marks[0]).toMatchObject({ state: 'partial', fraction: 0.02 });
  });

  it('shows held where the next session is while a lockout is open, and not after a hold is over', async () => {
    const { patient, courseId } = await onCourse();
    const tomorrow = new Date(Date.parse(await clinic.now()) + day * 1000).toISOString();
    await lock(patient, tomorrow);
    expect((await statesOf(courseId)).slice(0, 2)).toEqual(['held', 'planned']);
    await clinic.advance(2 * day);
    expect((await statesOf(courseId)).slice(0, 4)).toEqual(['missed', 'missed', 'next', 'planned']);
    await lock(patient);
    expect((await statesOf(courseId))[2]).toBe('held');
  });

  it('keeps excused apart from missed, and both out of what was done', async () => {
    const { courseId } = await onCourse();
    const { marks } = await read(courseId);
    await clinic.advance(2 * day);
    const [first, second] = marks;
    await closePlanned(clinic.client.db, first?.plannedSessionId ?? '', await clinic.now(), 'excused');
    await closePlanned(clinic.client.db, second?.plannedSessionId ?? '', await clinic.now(), 'missed');
    const course = await read(courseId);
    expect(course.marks.slice(0, 2).map(({ state }) => state)).toEqual(['excused', 'missed']);
    expect(course.adherence).toMatchObject({ complete: 0, planned: 1, missedRunning: 1 });
  });

  it('is read for many courses with one statement, and for none with none', async () => {
    const courses = [await onCourse(2), await onCourse(3)];
    const ids = courses.map(({ courseId }) => courseId);
    const marks = await listMarks(clinic.client.db, ids, await clinic.now());
    expect(ids.map((id) => marks.get(id)?.length)).toEqual([2, 3]);
    const planned = await listPlanned(clinic.client.db, ids);
    expect(ids.map((id) => planned.get(id)?.sessions.length)).toEqual([2, 3]);
    expect((await listMarks(clinic.client.db, [], await clinic.now())).size).toBe(0);
  });
});

describe('reading a course', () => {
  it('is for the participant and the site’s staff, and for nobody else', async () => {
    const { patient, courseId } = await onCourse();
    expect((await read(courseId, patient)).participantId).toBe(patient.participantId);
    expect((await clinic.refused(stranger, readCourse, { params: { courseId } })).status).toBe(404);
    const other = await clinic.patient('Somebody Else', siteId);
    expect((await clinic.refused(other, readCourse, { params: { courseId } })).status).toBe(404);
  });
});

describe('a pause', () => {
  const pause = (courseId: string, paused: boolean) => ({ params: { courseId }, body: { paused, reason: 'A cold' } });

  it('voids the live permit at once, and ends by going on', async () => {
    const { patient, courseId } = await onCourse();
    const { permitId } = await givePermit(clinic, patient);
    expect((await clinic.call(oona, pauseCourse, pause(courseId, true))).state).toBe('paused');
    const [permit] = await clinic.rows({ closed_why: z.string() }, 'select closed_why from permit where id = $1', [
      permitId,
    ]);
    expect(permit?.closed_why).toBe('void_paused');
    expect((await clinic.call(oona, pauseCourse, pause(courseId, false))).state).toBe('active');
    expect((await listPlanned(clinic.client.db, [courseId])).get(courseId)?.holds).toHaveLength(1);
  });

  it('is refused when it is so already, and on a course that is over', async () => {
    const { patient, courseId } = await onCourse();
    expect((await clinic.refused(oona, pauseCourse, pause(courseId, false))).code).toBe('course.already_so');
    await clinic.call(oona, pauseCourse, pause(courseId, true));
    expect((await clinic.refused(oona, pauseCourse, pause(courseId, true))).code).toBe('course.already_so');
    await clinic.call(oona, withdrawParticipant, {
      params: { participantId: patient.participantId },
      body: { reason: 'Moved away' },
    });
    expect((await clinic.refused(oona, pauseCourse, pause(courseId, false))).code).toBe('course.not_active');
    expect((await read(courseId)).state).toBe('withdrawn');
  });

  it('lets the prescription be amended meanwhile, and stays', async () => {
    const { patient, courseId, prescriptionId } = await onCourse();
    await clinic.call(oona, pauseCourse, pause(courseId, true));
    await sign(
      clinic,
      oona,
      await write(clinic, oona, patient, {
        amendsId: prescriptionId,
        reason: 'Headache',
        dose: { intensityMilliamp: 1 },
      }),
    );
    expect(await read(courseId)).toMatchObject({ state: 'paused', prescriptionVersion: 2 });
  });
});

describe('moving a session', () => {
  async function movable() {
    const { patient, courseId } = await onCourse(3);
    const { marks } = await read(courseId);
    const today = localDate(Date.parse(await clinic.now()), 'Europe/London');
    const move = (to: string, id = marks[0]?.plannedSessionId ?? '') => ({
      params: { plannedSessionId: id },
      body: { day: to, reason: 'Away' },
    });
    return { patient, courseId, marks, today, move };
  }

  it('puts it on another day in the same hours, leaves the old row closed as moved, and numbers anew', async () => {
    const { courseId, marks, today, move } = await movable();
    const course = await clinic.call(coordinator, rescheduleSession, move(addDays(today, 5)));
    expect(course.marks).toHaveLength(3);
    expect(course.marks.map(({ number }) => number)).toEqual([1, 2, 3]);
    expect(localDate(Date.parse(course.marks[2]?.windowFrom ?? ''), 'Europe/London')).toBe(addDays(today, 5));
    const rows = await clinic.rows(
      { closed_why: z.string(), replaced_by: z.string() },
      'select p.closed_why, r.id replaced_by from planned_session p join planned_session r on r.replaces_id = p.id where p.course_id = $1',
      [courseId],
    );
    expect(rows).toEqual([{ closed_why: 'moved', replaced_by: course.marks[2]?.plannedSessionId }]);
    expect(
      (await clinic.refused(coordinator, rescheduleSession, move(addDays(today, 6), marks[0]?.plannedSessionId))).code,
    ).toBe('planned_session.closed');
  });

  it('is refused onto a day that is taken, outside the prescription, and into the past', async () => {
    const { today, move } = await movable();
    const codeOf = async (to: string) => (await clinic.refused(coordinator, rescheduleSession, move(to))).code;
    expect(await codeOf(addDays(today, 1))).toBe('planned_session.day_taken');
    expect(await codeOf(addDays(today, 61))).toBe('planned_session.outside_prescription');
    expect(await codeOf(addDays(today, -1))).toBe('planned_session.outside_prescription');
    expect(await codeOf('9999-12-31')).toBe('planned_session.outside_prescription');
  });

  it('is refused for one that is under way or over, and is not there for another site', async () => {
    const { patient, today, move } = await movable();
    expect((await clinic.refused(stranger, rescheduleSession, move(addDays(today, 5)))).status).toBe(404);
    await beginSession(clinic, patient);
    expect((await clinic.refused(coordinator, rescheduleSession, move(addDays(today, 5)))).code).toBe(
      'planned_session.closed',
    );
  });
});

describe('the end of a course', () => {
  it('comes with its last session: prescription, plan and course close, and the worklist says so', async () => {
    const { patient, courseId, prescriptionId } = await onCourse(2);
    await write(clinic, oona, patient, { amendsId: prescriptionId, reason: 'Draft', schedule: { sessionsTotal: 3 } });
    await recordSession(clinic, patient);
    expect(await closeCourseIfDone(clinic.client.db, courseId, await clinic.now())).toBe(false);
    await clinic.advance(day);
    await recordSession(clinic, patient);
    expect(await closeCourseIfDone(clinic.client.db, courseId, await clinic.now())).toBe(true);
    expect(await closeCourseIfDone(clinic.client.db, courseId, await clinic.now())).toBe(false);
    const course = await read(courseId);
    expect(course).toMatchObject({ state: 'finished', sessionsDone: 2, awaitingAcknowledgement: false });
    expect(course.marks.map(({ state }) => state)).toEqual(['delivered', 'delivered']);
    const closed = await clinic.rows(
      { closed_why: z.string() },
      'select closed_why from prescription where course_id = $1 order by created_at',
      [courseId],
    );
    expect(closed.map(({ closed_why }) => closed_why)).toEqual(['course_ended', 'discarded']);
    const items = await clinic.rows(
      { why: z.string(), level: z.string() },
      'select why, level from worklist_item where participant_id = $1',
      [patient.participantId],
    );
    expect(items).toEqual([{ why: 'course_ending', level: 'due' }]);
  });

  it('counts a session that was delivered in a row cancelled meanwhile', async () => {
    const { patient, courseId, prescriptionId } = await onCourse(2);
    const begun = await givePermit(clinic, patient);
    await sign(
      clinic,
      oona,
      await write(clinic, oona, patient, { amendsId: prescriptionId, reason: 'Skin', schedule: { sessionsTotal: 2 } }),
    );
    const now = await clinic.now();
    await clinic.client.pool.query('update session set started_at = $2 where id = $1', [begun.sessionId, now]);
    await endWithRecord(clinic, begun, 1);
    const course = await read(courseId);
    expect(course.sessionsDone).toBe(1);
    expect(course.marks[0]).toMatchObject({ plannedSessionId: begun.plannedSessionId, state: 'delivered' });
    await recordSession(clinic, patient);
    expect(await closeCourseIfDone(clinic.client.db, courseId, await clinic.now())).toBe(true);
    const left = await clinic.rows(
      { n: z.number() },
      'select count(*)::int n from planned_session where course_id = $1 and closed_at is null',
      [courseId],
    );
    expect(left).toEqual([{ n: 0 }]);
  });
});
