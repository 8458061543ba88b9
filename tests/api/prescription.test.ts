// Writing, signing by one and by two, amending, acknowledging and reading a prescription, on a real database.

import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { acknowledgePrescription } from '@/server/features/prescription/acknowledge-prescription';
import { listPrescriptions } from '@/server/features/prescription/list-prescriptions';
import { readPrescription } from '@/server/features/prescription/read-prescription';
import { signPrescription } from '@/server/features/prescription/sign-prescription';
import { writePrescription } from '@/server/features/prescription/write-prescription';
import { readCourse } from '@/server/features/course/read-course';
import { openClinic, type Clinic, type Patient } from '../support/clinic';
import { acknowledge, inForce, prescriptionFor, sign, signatureOn, write, type Change } from '../support/prescribing';
import { beginSession, givePermit, recordSession } from '../support/sessions';

let clinic: Clinic;
let siteId: string;
let otherSiteId: string;
let oona: AccountActor;
let bram: AccountActor;
let stranger: AccountActor;

beforeAll(async () => {
  clinic = await openClinic();
  siteId = await clinic.site('LS', { mostCurrentMilliamp: 3 });
  otherSiteId = await clinic.site('MR');
  oona = await clinic.staff('Oona Feld', 'clinician', siteId);
  bram = await clinic.staff('Bram Tiel', 'clinician', siteId);
  stranger = await clinic.staff('Odd Man', 'clinician', otherSiteId);
});
afterAll(() => clinic.close());

const newPatient = (zone?: string): Promise<Patient> => clinic.patient('Ines Marlow', siteId, { zone });

async function refusalOf(patient: Patient, change: Change, who: AccountActor = oona) {
  const refusal = await clinic.refused(who, writePrescription, {
    body: prescriptionFor(patient, await clinic.now(), change),
  });
  return { status: refusal.status, code: refusal.code, fields: refusal.fields ?? [] };
}

const count = async (text: string, id: string) =>
  (await clinic.rows({ n: z.number() }, `select count(*)::int n from ${text}`, [id]))[0]?.n;

describe('writing', () => {
  it('makes a draft with its dose computed and each limit with layer and source', async () => {
    const draft = await write(clinic, oona, await newPatient());
    expect(draft).toMatchObject({
      status: 'draft',
      version: null,
      verdict: 'accept',
      signedAt: null,
      acknowledgedAt: null,
      livePermits: 0,
    });
    expect(draft.computed.chargeCoulomb).toBeCloseTo(2.46, 9);
    expect(draft.computed.minutes).toBe(21);
    expect(draft.rows.find(({ row }) => row === 'current')).toMatchObject({
      value: 2,
      siteLimit: 3,
      ceiling: 4,
      tier: 'accept',
    });
  });

  it('refuses a dose above the ceiling with the field, the limit, its layer and its source, and stores nothing', async () => {
    const patient = await clinic.patient('At the other site', otherSiteId);
    const { status, code, fields } = await refusalOf(patient, { dose: { intensityMilliamp: 4.1 } }, stranger);
    expect([status, code]).toEqual([409, 'prescription.over_limit']);
    expect(fields).toContainEqual({
      path: 'dose.intensityMilliamp',
      code: 'current',
      facts: expect.objectContaining({
        value: 4.1,
        limit: 4,
        unit: 'mA',
        layer: 'ceiling',
        source: expect.stringContaining('Bikson'),
      }),
    });
    expect(await count('course where participant_id = $1', patient.participantId)).toBe(0);
  });

  it('refuses a dose above the site’s own limit and names the site', async () => {
    const { fields } = await refusalOf(await newPatient(), { dose: { intensityMilliamp: 3.5 } });
    expect(fields[0]).toMatchObject({ code: 'current', facts: { limit: 3, layer: 'site', source: 'site protocol' } });
  });

  it('refuses a schedule that cannot be lived, field by field', async () => {
    const { code, fields } = await refusalOf(await newPatient(), { schedule: { minGapHours: 30, maxPer7Days: 3 } });
    expect(code).toBe('prescription.schedule');
    expect(fields.map(({ path }) => path)).toEqual(['schedule.minGapHours', 'schedule.maxPer7Days']);
  });

  it('refuses odd amounts without a fault: nothing, a hair, an empty pad', async () => {
    const patient = await newPatient();
    expect((await refusalOf(patient, { dose: { intensityMilliamp: 0 } })).fields[0]).toMatchObject({
      path: 'dose.intensityMilliamp',
    });
    const pads = prescriptionFor(patient, await clinic.now()).dose.electrodes.map((pad) => ({
      ...pad,
      areaSquareCentimetre: 0,
    }));
    expect((await refusalOf(patient, { dose: { electrodes: pads } })).code).toBe('prescription.over_limit');
    expect((await refusalOf(patient, { dose: { holdSeconds: 1_000_000 } })).code).toBe('prescription.over_limit');
    expect((await write(clinic, oona, patient, { dose: { intensityMilliamp: 0.00001 } })).dose.intensityMilliamp).toBe(
      0.001,
    );
  });

  it('is not there for a clinician of another site', async () => {
    const patient = await newPatient();
    expect(await refusalOf(patient, {}, stranger)).toMatchObject({ status: 404, code: 'not_found' });
    const draft = await write(clinic, oona, patient);
    for (const action of [readPrescription] as const) {
      expect((await clinic.refused(stranger, action, { params: { prescriptionId: draft.id } })).status).toBe(404);
    }
    expect((await clinic.refused(stranger, signPrescription, signatureOn(draft))).status).toBe(404);
    expect(
      (await clinic.refused(stranger, listPrescriptions, { params: { participantId: patient.participantId } })).status,
    ).toBe(404);
  });

  it('discards the draft before it, with what waited for a second signature', async () => {
    const patient = await newPatient();
    const first = await write(clinic, oona, patient, { dose: { intensityMilliamp: 2.5 } });
    await sign(clinic, oona, first);
    await write(clinic, oona, patient);
    expect(await clinic.call(oona, readPrescription, { params: { prescriptionId: first.id } })).toMatchObject({
      status: 'discarded',
    });
    expect(await count('worklist_item where participant_id = $1 and closed_at is null', patient.participantId)).toBe(0);
    expect((await clinic.refused(bram, signPrescription, signatureOn(first, 'second_signature'))).code).toBe(
      'version.stale',
    );
  });

  it('for somebody who has withdrawn is refused', async () => {
    const patient = await newPatient();
    await clinic.client.pool.query(`update participant set closed_at = now(), closed_why = 'withdrawn' where id = $1`, [
      patient.participantId,
    ]);
    expect((await refusalOf(patient, {})).code).toBe('participant.withdrawn');
  });
});

describe('signing', () => {
  it('puts a routine dose in force with one signature and plans every session of the course', async () => {
    const patient = await newPatient('America/New_York');
    const signed = await sign(clinic, oona, await write(clinic, oona, patient));
    expect(signed).toMatchObject({
      status: 'signed',
      version: 1,
      signatures: [{ name: 'Oona Feld', meaning: 'prescribed', contentHash: signed.contentHash }],
    });
    const course = await clinic.call(patient, readCourse, { params: { courseId: signed.courseId } });
    expect(course).toMatchObject({
      state: 'active',
      awaitingAcknowledgement: true,
      sessionsTotal: 20,
      sessionsDone: 0,
      zone: 'America/New_York',
    });
    expect(course.marks.map(({ number }) => number)).toEqual(Array.from({ length: 20 }, (_, at) => at + 1));
    expect(course.marks.map(({ state }) => state)).toEqual(['next', ...Array.from({ length: 19 }, () => 'planned')]);
    expect(await count(`outbox where kind = 'something_to_confirm' and to_email = $1`, patient.email)).toBe(1);
  });

  it('needs a second clinician above the routine tier, and tells the others of the site', async () => {
    const patient = await newPatient();
    const draft = await write(clinic, oona, patient, { dose: { intensityMilliamp: 2.5 } });
    expect(draft.verdict).toBe('second_signature');
    const waiting = await sign(clinic, oona, draft);
    expect(waiting).toMatchObject({ status: 'awaiting_second_signature', version: null });
    expect(await count(`planned_session where participant_id = $1`, patient.participantId)).toBe(0);
    expect(
      await count(
        `worklist_item where prescription_id = $1 and why = 'second_signature' and level = 'due' and closed_at is null`,
        draft.id,
      ),
    ).toBe(1);
    const told = await clinic.rows(
      { to_email: z.string() },
      `select to_email from outbox where key like 'second_signature_asked:${draft.id}:%'`,
    );
    expect(told).toEqual([{ to_email: bram.email }]);

    expect((await clinic.refused(oona, signPrescription, signatureOn(draft, 'second_signature'))).code).toBe(
      'prescription.same_signer',
    );
    expect((await clinic.refused(bram, signPrescription, signatureOn(draft, 'prescribed'))).code).toBe(
      'prescription.already_signed',
    );
    const signed = await sign(clinic, bram, draft, 'second_signature');
    expect(signed).toMatchObject({ status: 'signed', version: 1 });
    expect(signed.signatures.map(({ name, meaning }) => [name, meaning])).toEqual([
      ['Oona Feld', 'prescribed'],
      ['Bram Tiel', 'second_signature'],
    ]);
    expect(await count(`worklist_item where prescription_id = $1 and closed_at is null`, draft.id)).toBe(0);
  });

  it('refuses another content than the one that was on the screen', async () => {
    const draft = await write(clinic, oona, await newPatient());
    expect(
      (await clinic.refused(oona, signPrescription, signatureOn({ ...draft, contentHash: '0'.repeat(64) }))).code,
    ).toBe('version.stale');
  });

  it('judges again by the limits in force now', async () => {
    const tightening = await clinic.site(`T${Date.now() % 1000}`.slice(0, 4));
    const clinician = await clinic.staff('Wren Asquith', 'clinician', tightening);
    const patient = await clinic.patient('Pell Okoro', tightening);
    const draft = await write(clinic, clinician, patient);
    await clinic.client.pool.query(
      `insert into protocol (id, site_id, version, settings, reason, signed_by, signed_by_name, signed_at, content_hash)
       select $1, site_id, 2, jsonb_set(jsonb_set(settings, '{limits,mostCurrentMilliamp}', '1'), '{limits,routineCurrentMilliamp}', '1'), 'tighter', 'x', 'x', now(), 'x'
       from protocol where site_id = $2`,
      [randomUUID(), tightening],
    );
    const refusal = await clinic.refused(clinician, signPrescription, signatureOn(draft));
    expect(refusal.code).toBe('prescription.over_limit');
    expect(refusal.fields?.[0]).toMatchObject({ facts: { limit: 1, layer: 'site' } });
    expect(await count('signature where subject_id = $1', draft.id)).toBe(0);
  });

  it('by two clinicians at the same time leaves one version in force', async () => {
    const draft = await write(clinic, oona, await newPatient());
    const outcomes = await Promise.allSettled([sign(clinic, oona, draft), sign(clinic, bram, draft)]);
    expect(outcomes.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(await count('signature where subject_id = $1', draft.id)).toBe(1);
    expect(await count('planned_session where prescription_id = $1', draft.id)).toBe(20);
  });

  it('with one key twice signs once and answers alike', async () => {
    const draft = await write(clinic, oona, await newPatient());
    const given = { ...signatureOn(draft), key: randomUUID() };
    const first = await clinic.call(oona, signPrescription, given);
    expect(await clinic.call(oona, signPrescription, given)).toEqual(first);
  });
});

describe('amending', () => {
  it('needs a reason and the version in force', async () => {
    const patient = await newPatient();
    const one = await inForce(clinic, oona, patient);
    expect((await refusalOf(patient, { amendsId: one.id })).code).toBe('prescription.reason_missing');
    expect((await refusalOf(patient, { amendsId: randomUUID(), reason: 'Skin' })).code).toBe('version.stale');
    expect((await refusalOf(patient, {})).code).toBe('version.stale');
  });

  it('voids the live permit, supersedes the old version and plans what is left, beside what is done', async () => {
    const patient = await newPatient();
    const one = await inForce(clinic, oona, patient);
    const done = await recordSession(clinic, patient);
    await clinic.advance(86_400);
    const { permitId } = await givePermit(clinic, patient);
    const draft = await write(clinic, oona, patient, {
      amendsId: one.id,
      reason: 'Headache after three sessions',
      dose: { intensityMilliamp: 1.5 },
    });
    expect(draft.livePermits).toBe(1);
    expect(await count('permit where id = $1 and closed_at is null', permitId)).toBe(1);

    const two = await sign(clinic, oona, draft);
    expect(two).toMatchObject({
      version: 2,
      amendsId: one.id,
      reason: 'Headache after three sessions',
      livePermits: 0,
      acknowledgedAt: null,
    });
    const [permit] = await clinic.rows({ closed_why: z.string() }, 'select closed_why from permit where id = $1', [
      permitId,
    ]);
    expect(permit).toEqual({ closed_why: 'void_amended' });
    expect(await clinic.call(oona, readPrescription, { params: { prescriptionId: one.id } })).toMatchObject({
      status: 'superseded',
    });

    const course = await clinic.call(oona, readCourse, { params: { courseId: one.courseId } });
    expect(course).toMatchObject({
      prescriptionVersion: 2,
      awaitingAcknowledgement: true,
      sessionsDone: 1,
      sessionsTotal: 20,
    });
    expect(course.marks).toHaveLength(20);
    expect(course.marks[0]).toMatchObject({
      plannedSessionId: done.plannedSessionId,
      state: 'delivered',
      fraction: 1,
      plannedMinutes: 21,
    });
    expect(course.dose).toMatchObject({ intensityMilliamp: 1.5 });
  });

  it('plans no second session on the day of one that is under way, and leaves that one alone', async () => {
    const patient = await newPatient();
    const one = await inForce(clinic, oona, patient);
    const running = await beginSession(clinic, patient);
    await sign(
      clinic,
      oona,
      await write(clinic, oona, patient, { amendsId: one.id, reason: 'Skin', dose: { intensityMilliamp: 1 } }),
    );
    const course = await clinic.call(oona, readCourse, { params: { courseId: one.courseId } });
    expect(course.marks).toHaveLength(20);
    expect(course.marks[0]).toMatchObject({ plannedSessionId: running.plannedSessionId, state: 'running' });
    expect(await count('planned_session where id = $1 and closed_at is null', running.plannedSessionId)).toBe(1);
    const days = course.marks.map(({ windowFrom }) => windowFrom.slice(0, 10));
    expect(new Set(days).size).toBe(20);
  });

  it('cannot be signed once another amendment is in force', async () => {
    const patient = await newPatient();
    const one = await inForce(clinic, oona, patient);
    const mine = await write(clinic, oona, patient, { amendsId: one.id, reason: 'Skin' });
    await clinic.client.pool.query(
      `update prescription set closed_at = now(), closed_why = 'superseded' where id = $1`,
      [one.id],
    );
    expect((await clinic.refused(oona, signPrescription, signatureOn(mine))).code).toBe('version.stale');
  });

  it('leaves a window that has closed to be missed, not cancelled', async () => {
    const patient = await newPatient();
    const one = await inForce(clinic, oona, patient);
    await clinic.advance(2 * 86_400);
    await sign(clinic, oona, await write(clinic, oona, patient, { amendsId: one.id, reason: 'Skin' }));
    const course = await clinic.call(oona, readCourse, { params: { courseId: one.courseId } });
    expect(course.marks.slice(0, 3).map(({ state }) => state)).toEqual(['missed', 'missed', 'next']);
    expect(course.marks).toHaveLength(22);
  });
});

describe('acknowledging', () => {
  it('is kept once, and answers alike the second time', async () => {
    const patient = await newPatient();
    const version = await sign(clinic, oona, await write(clinic, oona, patient));
    const first = await acknowledge(clinic, patient, version);
    await clinic.advance(60);
    expect(await acknowledge(clinic, patient, version)).toEqual(first);
    const seen = await clinic.call(patient, readPrescription, { params: { prescriptionId: version.id } });
    expect(seen.acknowledgedAt).toBe(first.acknowledgedAt);
  });

  it('is refused for a version that is no longer in force, and not there for a draft or for somebody else', async () => {
    const patient = await newPatient();
    const one = await inForce(clinic, oona, patient);
    const draft = await write(clinic, oona, patient, { amendsId: one.id, reason: 'Skin' });
    const ask = (who: Patient, id: string) =>
      clinic.refused(who, acknowledgePrescription, { params: { prescriptionId: id }, body: {} });
    expect((await ask(patient, draft.id)).status).toBe(404);
    expect((await ask(await newPatient(), one.id)).status).toBe(404);
    await sign(clinic, oona, draft);
    expect((await ask(patient, one.id)).code).toBe('version.stale');
  });
});

describe('reading', () => {
  it('shows a participant the signed versions alone, and a monitor no person’s own words', async () => {
    const patient = await newPatient();
    const one = await inForce(clinic, oona, patient);
    const draft = await write(clinic, oona, patient, { amendsId: one.id, reason: 'Skin to settle' });
    const monitor = await clinic.staff('Monitor', 'monitor', siteId);
    const list = (who: AccountActor, query = {}) =>
      clinic.call(who, listPrescriptions, { params: { participantId: patient.participantId }, query });
    expect((await list(patient)).items.map(({ id }) => id)).toEqual([one.id]);
    expect((await list(oona)).items.map(({ id, reason }) => [id, reason])).toEqual([
      [draft.id, 'Skin to settle'],
      [one.id, null],
    ]);
    expect((await list(monitor)).items.map(({ reason }) => reason)).toEqual([null, null]);
    expect((await clinic.refused(patient, readPrescription, { params: { prescriptionId: draft.id } })).status).toBe(
      404,
    );
  });

  it('goes on where the last page ended, and knows a cursor that is not its own', async () => {
    const patient = await newPatient();
    const one = await inForce(clinic, oona, patient);
    for (const reason of ['a', 'b']) await write(clinic, oona, patient, { amendsId: one.id, reason });
    const params = { participantId: patient.participantId };
    const first = await clinic.call(oona, listPrescriptions, { params, query: { limit: 2 } });
    const second = await clinic.call(oona, listPrescriptions, {
      params,
      query: { limit: 2, cursor: first.nextCursor ?? '' },
    });
    expect([...first.items, ...second.items].map(({ reason }) => reason)).toEqual(['b', 'a', null]);
    expect(second.nextCursor).toBeNull();
    for (const cursor of ['x', Buffer.from('["never","mine"]').toString('base64url')]) {
      const refusal = await clinic.refused(oona, listPrescriptions, { params, query: { cursor } });
      expect(refusal).toMatchObject({ status: 422, fields: [{ path: 'cursor', code: 'cursor_unknown' }] });
    }
  });

  it('leaves an entry in the audit trail for each read and each write', async () => {
    const patient = await newPatient();
    const draft = await write(clinic, oona, patient);
    await clinic.call(bram, readPrescription, { params: { prescriptionId: draft.id } });
    const entries = await clinic.rows(
      { action: z.string(), kind: z.string(), actor_id: z.string() },
      'select action, kind, actor_id from audit_entry where participant_id = $1 order by sequence',
      [patient.participantId],
    );
    expect(entries).toEqual([
      { action: 'prescription.write', kind: 'write', actor_id: oona.accountId },
      { action: 'prescription.read', kind: 'read', actor_id: bram.accountId },
    ]);
  });
});

describe('the database itself', () => {
  it('refuses 4.1 mA, whoever inserts it', async () => {
    const draft = await write(clinic, oona, await newPatient());
    const insert = clinic.client.pool.query(
      `insert into prescription select (jsonb_populate_record(p, jsonb_build_object('id', $2::text, 'intensity_ua', 4100))).* from prescription p where p.id = $1`,
      [draft.id, randomUUID()],
    );
    await expect(insert).rejects.toThrow(/prescription_intensity_ceiling/);
  });

  it('refuses to change a signed dose', async () => {
    const version = await inForce(clinic, oona, await newPatient());
    await expect(
      clinic.client.pool.query('update prescription set intensity_ua = 1000 where id = $1', [version.id]),
    ).rejects.toThrow(/cannot change/);
  });
});
