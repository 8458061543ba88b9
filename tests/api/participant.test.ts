// Participants: enrolled, invited, listed, read, withdrawn.

import { randomUUID } from 'node:crypto';
import pg from 'pg';
import { z } from 'zod';
import { closeCourse } from '@/db/queries/course-state';
import { insertLockout } from '@/db/queries/lockout';
import type { AccountActor } from '@/server/action';
import { pauseCourse } from '@/server/features/course/pause-course';
import { enrolParticipant } from '@/server/features/participant/enrol-participant';
import { inviteAgain } from '@/server/features/participant/invite-again';
import { listParticipants } from '@/server/features/participant/list-participants';
import { readParticipant } from '@/server/features/participant/read-participant';
import { readTimeline } from '@/server/features/participant/read-timeline';
import { readTrends } from '@/server/features/participant/read-trends';
import { withdrawParticipant } from '@/server/features/participant/withdraw-participant';
import { participantStates } from '@/shared/contracts/participant';
import { openClinic, type Clinic, type Patient } from '../support/clinic';
import { inForce } from '../support/prescribing';
import { keepDiary, makeReady } from '../support/records';
import { givePermit, recordSession } from '../support/sessions';

let clinic: Clinic;
let siteId: string;
let otherSiteId: string;
let clinician: AccountActor;
let coordinator: AccountActor;
let monitor: AccountActor;
let stranger: AccountActor;

beforeAll(async () => {
  clinic = await openClinic();
  siteId = await clinic.site('LS');
  otherSiteId = await clinic.site('MR');
  clinician = await clinic.staff('Cora Clinician', 'clinician', siteId);
  coordinator = await clinic.staff('Cleo Coordinator', 'coordinator', siteId);
  monitor = await clinic.staff('Mona Monitor', 'monitor', siteId);
  stranger = await clinic.staff('Otto Other', 'clinician', otherSiteId);
});
afterAll(() => clinic.close());

const person = (email: string, more = {}) => ({
  ...{ siteId, name: 'Ines Marlow', email, phone: '020 7946 0142', bornOn: '1984-03-02', zone: 'Europe/London' },
  emergencyContact: { name: 'Tam Marlow', phone: '020 7946 0143' },
  ...more,
});

const fields = ({ fields: found }: { fields?: readonly { path: string }[] }) => found?.map(({ path }) => path);

describe('enrolment', () => {
  it('gives running codes and one mail with a link, however often the key comes', async () => {
    const first = await clinic.call(coordinator, enrolParticipant, {
      body: person('a@harrowmere.example'),
      key: 'enrol-a-1',
    });
    const again = await clinic.call(coordinator, enrolParticipant, {
      body: person('a@harrowmere.example'),
      key: 'enrol-a-1',
    });
    const second = await clinic.call(coordinator, enrolParticipant, { body: person('b@harrowmere.example') });
    expect(again).toEqual(first);
    expect([first.code, second.code]).toEqual(['LS-0001', 'LS-0002']);
    const mails = await clinic.rows(
      { facts: z.object({ path: z.string(), siteName: z.string(), name: z.string() }) },
      `select facts from outbox where to_email = 'a@harrowmere.example'`,
    );
    expect(mails.map(({ facts }) => facts.path)).toEqual([expect.stringMatching(/^\/invitation#token=.{40,}$/)]);
  });

  it('gives every one of many who enrol at once a number of their own', async () => {
    const bodies = Array.from({ length: 6 }, (_, index) => person(`many-${index}@harrowmere.example`));
    const codes = await Promise.all(bodies.map((body) => clinic.call(coordinator, enrolParticipant, { body })));
    expect(new Set(codes.map(({ code }) => code)).size).toBe(6);
  });

  it('refuses an address that is taken, whoever has it, and leaves no number unused', async () => {
    const taken = await clinic.refused(coordinator, enrolParticipant, { body: person('A@harrowmere.example') });
    expect([taken.code, fields(taken)]).toEqual(['participant.address_taken', ['email']]);
    const ofStaff = await clinic.refused(coordinator, enrolParticipant, { body: person(clinician.email) });
    expect(ofStaff.code).toBe('participant.address_taken');
    const next = await clinic.call(coordinator, enrolParticipant, { body: person('next@harrowmere.example') });
    expect(next.code).toBe('LS-0009');
  });

  it('lets one of two who race for an address through', async () => {
    const body = person('race@harrowmere.example');
    const both = await Promise.allSettled([
      clinic.call(coordinator, enrolParticipant, { body }),
      clinic.call(clinician, enrolParticipant, { body }),
    ]);
    expect(both.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
  });

  it('refuses children under twelve and people who are not born yet', async () => {
    const young = await clinic.refused(coordinator, enrolParticipant, {
      body: person('y@harrowmere.example', { bornOn: '2024-01-01' }),
    });
    expect([young.code, fields(young)]).toEqual(['participant.too_young', ['bornOn']]);
    const unborn = await clinic.refused(coordinator, enrolParticipant, {
      body: person('u@harrowmere.example', { bornOn: '2999-01-01' }),
    });
    expect(unborn.code).toBe('participant.born_in_future');
  });

  it('at a site of others finds no site', async () => {
    const refusal = await clinic.refused(stranger, enrolParticipant, { body: person('s@harrowmere.example') });
    expect(refusal.status).toBe(404);
  });

  it('can be followed by a new invitation, which ends the old link', async () => {
    const { id } = await clinic.call(coordinator, enrolParticipant, { body: person('again@harrowmere.example') });
    await clinic.call(coordinator, inviteAgain, { params: { participantId: id }, body: {} });
    const links = await clinic.rows(
      { closed_why: z.string().nullable() },
      'select closed_why from invitation where subject_id = $1 order by created_at, closed_at nulls last',
      [id],
    );
    expect(links.map(({ closed_why: why }) => why)).toEqual(['replaced', null]);
    const joined = await clinic.patient('Jo Joined', siteId);
    const params = { participantId: joined.participantId };
    expect((await clinic.refused(coordinator, inviteAgain, { params, body: {} })).code).toBe('participant.has_account');
    expect((await clinic.refused(stranger, inviteAgain, { params, body: {} })).status).toBe(404);
  });
});

describe('a person who goes through a course', () => {
  let patient: Patient;
  const params = () => ({ participantId: patient.participantId });

  beforeAll(async () => {
    patient = await clinic.patient('Wanda Weaver', siteId);
    await makeReady(clinic, clinician, patient, siteId);
    await inForce(clinic, clinician, patient);
    const { sessionId } = await recordSession(clinic, patient, 1);
    const effects = [
      { kind: 'tingling', strength: 3, stillThere: false },
      { kind: 'itching', strength: 5, stillThere: false },
    ];
    await keepDiary(clinic, patient, sessionId, { effects, headacheAfter: 2, skin: 'red', freeText: 'A secret' });
  });

  it('is too early for the next one after the first', async () => {
    const view = await clinic.call(clinician, readParticipant, { params: params() });
    expect(view).toMatchObject({
      name: 'Wanda Weaver',
      state: 'too_early',
      contact: { email: patient.email, bornOn: '1984-03-02' },
      readiness: {
        accountActive: true,
        consent: 'current',
        screening: 'clear',
        training: 'signed_off',
        watched: { done: 1, required: 1 },
        device: { label: 'D' },
        prescription: 'acknowledged',
      },
      course: { state: 'active', sessionsDone: 1, adherence: { complete: 1, planned: 1, missedRunning: 0 } },
      lockouts: [],
    });
    expect(view.course?.marks).toHaveLength(20);
  });

  it('stands in the list with strip, adherence and the strongest effect of the last diary', async () => {
    const { items } = await clinic.call(clinician, listParticipants, { query: { search: 'wanda' } });
    expect(items).toHaveLength(1);
    expect(items[0]).toMatchObject({
      state: 'too_early',
      adherence: { complete: 1, planned: 1 },
      prescribed: { intensityMilliamp: 2, minutes: 21 },
      lastEffect: { kind: 'itching', strength: 5 },
      holds: 0,
    });
    expect(items[0]?.marks[0]).toMatchObject({ state: 'delivered', number: 1, headache: 2 });
  });

  it('is a code to the monitor, who cannot search by name', async () => {
    const view = await clinic.call(monitor, readParticipant, { params: params() });
    expect([view.name, view.contact, view.caregivers]).toEqual([patient.code, null, []]);
    expect((await clinic.call(monitor, listParticipants, { query: { search: 'wanda' } })).items).toEqual([]);
    const { items } = await clinic.call(monitor, listParticipants, { query: { search: patient.code.toLowerCase() } });
    expect(items.map(({ name }) => name)).toEqual([patient.code]);
  });

  it('has trends with what was felt, measured and delivered', async () => {
    const { points } = await clinic.call(monitor, readTrends, { params: params() });
    expect(points).toEqual([
      expect.objectContaining({
        number: 1,
        headache: 2,
        skin: 2,
        worstEffect: 5,
        deliveredCoulomb: 2.46,
        plannedCoulomb: 2.46,
      }),
    ]);
  });

  it('has one timeline, newest first, page by page, without a word of the person’s own', async () => {
    const whole = await clinic.call(monitor, readTimeline, { params: params(), query: { limit: 100 } });
    const kinds = whole.items.map(({ kind }) => kind);
    for (const kind of [
      'enrolled',
      'consent',
      'screening',
      'training',
      'watched_session',
      'device',
      'prescription',
      'acknowledgement',
      'session',
      'diary',
    ]) {
      expect(kinds).toContain(kind);
    }
    expect(whole.items.map(({ at }) => at)).toEqual(
      whole.items
        .map(({ at }) => at)
        .sort()
        .reverse(),
    );
    expect(JSON.stringify(whole)).not.toMatch(/A secret|Wanda/);
    const pages: string[] = [];
    let cursor: string | null | undefined;
    do {
      const page = await clinic.call(monitor, readTimeline, {
        params: params(),
        query: { limit: 3, ...(cursor ? { cursor } : {}) },
      });
      pages.push(...page.items.map(({ id }) => id));
      cursor = page.nextCursor;
    } while (cursor);
    expect(pages).toEqual(whole.items.map(({ id }) => id));
    const prescribed = whole.items.find(({ kind }) => kind === 'prescription');
    expect(prescribed).toMatchObject({
      facts: { version: 1, intensityMilliamp: 2, minutes: 21, isAmendment: false },
      by: 'Cora Clinician',
    });
  });

  it('is not there for another site, whichever door is tried', async () => {
    expect((await clinic.refused(stranger, readParticipant, { params: params() })).status).toBe(404);
    expect((await clinic.refused(stranger, readTimeline, { params: params() })).status).toBe(404);
    expect((await clinic.refused(stranger, readTrends, { params: params() })).status).toBe(404);
    const body = { reason: 'Moves away' };
    expect((await clinic.refused(stranger, withdrawParticipant, { params: params(), body })).status).toBe(404);
    const nobody = { participantId: randomUUID() };
    expect((await clinic.refused(clinician, readParticipant, { params: nobody })).status).toBe(404);
    expect((await clinic.call(stranger, listParticipants, {})).items).toEqual([]);
  });

  it('leaves an entry in the audit trail for each reading of the record', async () => {
    const count = async () => {
      const [row] = await clinic.rows(
        { n: z.number() },
        `select count(*)::int as n from audit_entry where participant_id = $1 and kind = 'read'`,
        [patient.participantId],
      );
      return row?.n ?? 0;
    };
    const before = await count();
    await clinic.call(clinician, readParticipant, { params: params() });
    await clinic.call(monitor, readTimeline, { params: params() });
    await clinic.call(monitor, readTrends, { params: params() });
    expect(await count()).toBe(before + 3);
  });

  it('withdraws: permit, plan, prescription and consent end, the device is asked back, the record stays', async () => {
    const { permitId } = await givePermit(clinic, patient);
    const answer = await clinic.call(coordinator, withdrawParticipant, {
      params: params(),
      body: { reason: 'Moves away' },
    });
    const [ends] = await clinic.rows(
      {
        permit: z.string(),
        course: z.string(),
        open: z.number(),
        prescription: z.string(),
        consents: z.number(),
        due: z.number(),
        account: z.string(),
      },
      `select (select closed_why from permit where id = $2) as permit,
        (select closed_why from course where participant_id = $1) as course,
        (select count(*)::int from planned_session where participant_id = $1 and closed_at is null) as open,
        (select closed_why from prescription where participant_id = $1) as prescription,
        (select count(*)::int from consent where participant_id = $1 and closed_at is null) as consents,
        (select count(*)::int from worklist_item where participant_id = $1 and why = 'device_return' and level = 'due') as due,
        (select a.state from account a join participant p on p.account_id = a.id where p.id = $1) as account`,
      [patient.participantId, permitId],
    );
    expect(ends).toEqual({
      permit: 'void_withdrawn',
      course: 'withdrawn',
      open: 0,
      prescription: 'course_ended',
      consents: 0,
      due: 1,
      account: 'closed',
    });
    const view = await clinic.call(clinician, readParticipant, { params: params() });
    expect(view).toMatchObject({
      state: 'withdrawn',
      withdrawnAt: answer.withdrawnAt,
      course: { state: 'withdrawn' },
      readiness: { consent: 'withdrawn' },
    });
    const again = await clinic.refused(coordinator, withdrawParticipant, {
      params: params(),
      body: { reason: 'Again' },
    });
    expect(again.code).toBe('participant.withdrawn');
    expect((await clinic.refused(coordinator, inviteAgain, { params: params(), body: {} })).code).toBe(
      'participant.withdrawn',
    );
  });
});

describe('the list of participants', () => {
  let manySiteId: string;
  let reader: AccountActor;

  beforeAll(async () => {
    manySiteId = await clinic.site('MA');
    reader = await clinic.staff('Rae Reader', 'coordinator', manySiteId);
    for (let index = 0; index < 7; index += 1) {
      const name = `Person ${String.fromCharCode(71 - index)}`;
      await clinic.call(reader, enrolParticipant, {
        body: person(`list-${index}@harrowmere.example`, { siteId: manySiteId, name }),
      });
    }
    await clinic.patient('Quentin Joined', manySiteId);
  });

  async function walk(query: Record<string, unknown>) {
    const found: { name: string; code: string; since: string; state: string }[] = [];
    let cursor: string | null | undefined;
    do {
      const page = await clinic.call(reader, listParticipants, {
        query: { limit: 3, ...query, ...(cursor ? { cursor } : {}) },
      });
      expect(page.items.length).toBeLessThanOrEqual(3);
      found.push(...page.items);
      cursor = page.nextCursor;
    } while (cursor);
    return found;
  }

  it.each(['name', 'code', 'since'] as const)('comes page by page in the order of %s', async (sort) => {
    const found = await walk({ sort });
    expect(found).toHaveLength(8);
    expect(new Set(found.map(({ code }) => code)).size).toBe(8);
    const keys = found.map((row) => (sort === 'name' ? row.name.toLowerCase() : row[sort]));
    expect(keys).toEqual([...keys].sort());
  });

  it('finds the state that is asked for, and no other, across pages', async () => {
    const invited = await walk({ state: 'invited' });
    expect(invited.map(({ state }) => state)).toEqual(Array.from({ length: 7 }, () => 'invited'));
    expect((await walk({ state: 'training' })).map(({ name }) => name)).toEqual(['Quentin Joined']);
    expect(await walk({ state: 'ready' })).toEqual([]);
  });

  it('finds by each state exactly the people whom the whole list says are in it', async () => {
    const stateSiteId = await clinic.site('ST');
    const keeper = await clinic.staff('Sam States', 'clinician', stateSiteId);
    const goingOn = async (name: string) => {
      const patient = await clinic.patient(name, stateSiteId);
      await makeReady(clinic, keeper, patient, stateSiteId);
      await inForce(clinic, keeper, patient);
      return patient;
    };
    await goingOn('Ready');
    await recordSession(clinic, await goingOn('Too Early'));
    const held = await goingOn('Held');
    const openedAt = await clinic.now();
    const lockout = { level: 'review', code: 'headache_high', source: 'staff', sourceId: null, until: null } as const;
    await insertLockout(clinic.client.db, {
      id: randomUUID(),
      participantId: held.participantId,
      openedAt,
      ...lockout,
    });
    const { course } = await clinic.call(keeper, readParticipant, {
      params: { participantId: (await goingOn('Paused')).participantId },
    });
    await clinic.call(keeper, pauseCourse, {
      params: { courseId: course?.id ?? '' },
      body: { paused: true, reason: 'Holiday' },
    });
    const done = await clinic.call(keeper, readParticipant, {
      params: { participantId: (await goingOn('Finished')).participantId },
    });
    await closeCourse(clinic.client.db, done.course?.id ?? '', await clinic.now(), 'finished');
    const gone = await goingOn('Withdrawn');
    await clinic.call(keeper, withdrawParticipant, {
      params: { participantId: gone.participantId },
      body: { reason: 'Moves' },
    });
    await clinic.patient('Training', stateSiteId);
    await clinic.call(keeper, enrolParticipant, {
      body: person('state@harrowmere.example', { siteId: stateSiteId, name: 'Invited' }),
    });

    const whole = (await clinic.call(keeper, listParticipants, {})).items;
    expect(whole.map(({ name, state }) => [name.toLowerCase().replace(' ', '_'), state])).toEqual(
      whole.map(({ state }) => [state, state]),
    );
    expect(new Set(whole.map(({ state }) => state))).toEqual(new Set(participantStates));
    for (const state of participantStates) {
      const found = await clinic.call(keeper, listParticipants, { query: { state } });
      expect(found.items.map(({ state: is }) => is)).toEqual([state]);
    }
  });

  it('takes what is typed by its letters, never as a pattern', async () => {
    expect(await walk({ search: 'PERSON' })).toHaveLength(7);
    expect((await walk({ search: 'joined' })).map(({ name }) => name)).toEqual(['Quentin Joined']);
    expect(await walk({ search: '%' })).toEqual([]);
    expect(await walk({ search: '_erson' })).toEqual([]);
    expect(await walk({ search: 'erson' })).toEqual([]);
  });

  it('refuses a cursor of another list', async () => {
    const cursor = Buffer.from(JSON.stringify(['a', 'not an id'])).toString('base64url');
    expect((await clinic.refused(reader, listParticipants, { query: { cursor } })).status).toBe(422);
  });

  it('asks the database a fixed number of questions, whatever the number of people', async () => {
    const countOf = async (limit: number) => {
      const query = jest.spyOn(pg.Client.prototype, 'query');
      const { items } = await clinic.call(reader, listParticipants, { query: { limit } });
      const { length } = query.mock.calls;
      query.mockRestore();
      return { items: items.length, statements: length };
    };
    const [one, all] = [await countOf(1), await countOf(8)];
    expect([one.items, all.items]).toEqual([1, 8]);
    expect(one.statements).toBeGreaterThan(1);
    expect(all.statements).toBe(one.statements);
  });
});
