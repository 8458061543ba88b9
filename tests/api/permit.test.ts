// Permits on a real database: one live permit whatever happens at once, bound, signed, ended by whatever ends it.

import { randomUUID } from 'node:crypto';
import { compactVerify, importJWK } from 'jose';
import { z } from 'zod';
import { connect } from '@/db/client';
import type { AccountActor } from '@/server/action';
import { readEnv } from '@/server/env';
import { pauseCourse } from '@/server/features/course/pause-course';
import { issuePermit } from '@/server/features/permit/issue-permit';
import { readPermit } from '@/server/features/permit/read-permit';
import { readPermitKeys } from '@/server/features/permit/read-permit-keys';
import { changeProtocol } from '@/server/features/protocol/change-protocol';
import { listProtocols } from '@/server/features/protocol/list-protocols';
import { makeTransact } from '@/server/transact';
import { PermitClaims, type PermitView } from '@/shared/contracts/permit';
import { secretOfTests, type Clinic } from '../support/clinic';
import { sign, write } from '../support/prescribing';
import {
  answer,
  permitBody,
  permitFor,
  readyPatient,
  send,
  wholeRun,
  numbered,
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

const ask = (ready: ReadyPatient, precheckId: string, key: string) =>
  clinic.call(ready.patient, issuePermit, { body: permitBody(ready, precheckId), key });
const refusedFor = async (ready: ReadyPatient, change: Partial<ReturnType<typeof permitBody>> = {}) => {
  const { id } = await answer(clinic, ready.patient);
  return clinic.refused(ready.patient, issuePermit, {
    body: { ...permitBody(ready, id), ...change },
    key: randomUUID(),
  });
};
const stateOf = async (ready: ReadyPatient, permit: PermitView) => {
  const { state, voidedBy } = await clinic.call(ready.patient, readPermit, { params: { permitId: permit.id } });
  return [state, voidedBy];
};
const livePermits = (ready: ReadyPatient) =>
  clinic.rows({ id: z.string() }, `select id from permit where participant_id = $1 and closed_at is null`, [
    ready.patient.participantId,
  ]);

it('gives one permit with its session, over 30 minutes later, and reserves the dose', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const permit = await permitFor(clinic, ready);
  expect(permit).toMatchObject({
    state: 'live',
    voidedBy: null,
    expiresBy: 'issue',
    counter: 1,
    prescriptionVersion: 1,
    sessionNumber: 1,
    sessionsTotal: 20,
  });
  expect(Date.parse(permit.expiresAt) - Date.parse(permit.issuedAt)).toBe(30 * 60_000);
  expect(permit.dose).toMatchObject({ intensityMilliamp: 2, chargeCoulomb: 2.46, minutes: 21 });
  const [session] = await clinic.rows(
    { id: z.string(), started_at: z.null(), closed_at: z.null() },
    `select id, started_at, closed_at from session where permit_id = $1`,
    [permit.id],
  );
  expect(session?.id).toBe(permit.sessionId);
  await clinic.advance(30 * 60);
  expect(await stateOf(ready, permit)).toEqual(['expired', null]);
});

it('signs what the stimulator is told by a published Ed25519 key, bound to person, device, dose and counter', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const permit = await permitFor(clinic, ready);
  const { keys } = await clinic.call(ready.patient, readPermitKeys, {});
  const [key] = keys;
  if (!key) throw new Error('no key');
  const { payload, protectedHeader } = await compactVerify(permit.token, await importJWK(key, 'EdDSA'));
  expect(protectedHeader).toMatchObject({ alg: 'EdDSA', kid: key.kid });
  expect(PermitClaims.parse(JSON.parse(new TextDecoder().decode(payload)))).toEqual({
    iss: 'rampwell',
    aud: ready.deviceId,
    jti: permit.id,
    iat: Math.floor(Date.parse(permit.issuedAt) / 1000),
    exp: Math.floor(Date.parse(permit.expiresAt) / 1000),
    participant: ready.patient.participantId,
    device: ready.deviceId,
    session: permit.sessionId,
    course: ready.courseId,
    prescriptionVersion: 1,
    counter: permit.counter,
    waveform: 'tDCS',
    intensityMicroamp: 2000,
    rampUpMs: 30_000,
    holdMs: 1_200_000,
    rampDownMs: 30_000,
    chargeMicrocoulomb: 2_460_000,
    montage: [
      { position: 'F3', polarity: 'anode' },
      { position: 'Fp2', polarity: 'cathode' },
    ],
  });
  await expect(compactVerify(`${permit.token.slice(0, -4)}AAAA`, await importJWK(key, 'EdDSA'))).rejects.toThrow();
});

it('leaves exactly one live permit when 50 requests race through two processes, and none of them fails', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const { id: precheckId } = await answer(clinic, ready.patient);
  const url = clinic.client.pool.options.connectionString ?? '';
  const env = readEnv({ DATABASE_URL: url, DEMO: '1', SECRET: secretOfTests });
  const clients = [connect(url, 25, () => undefined), connect(url, 25, () => undefined)];
  try {
    const processes = clients.map((client) => makeTransact(client, env));
    const outcomes = await Promise.all(
      Array.from({ length: 50 }, (_, index) => {
        const process = processes[index % 2];
        if (!process) throw new Error('no process');
        const asked = {
          actor: ready.patient,
          params: undefined,
          query: undefined,
          body: permitBody(ready, precheckId),
        };
        return process.run(issuePermit, { ...asked, key: randomUUID(), file: null, requestId: randomUUID() });
      }),
    );
    expect(outcomes.filter(({ refusal }) => refusal === null)).toHaveLength(1);
    expect(new Set(outcomes.flatMap(({ refusal }) => refusal?.code ?? []))).toEqual(new Set(['clearance.refused']));
  } finally {
    await Promise.all(clients.map((client) => client.close()));
  }
  expect(await livePermits(ready)).toHaveLength(1);
  const [audited] = await clinic.rows(
    { n: z.number() },
    `select count(*)::int n from audit_entry where participant_id = $1 and action = 'permit.issue'`,
    [ready.patient.participantId],
  );
  expect(audited?.n).toBe(50);
}, 60_000);

it('gives the same permit for the same key, with its present state, and never a second one', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const { id } = await answer(clinic, ready.patient);
  const key = randomUUID();
  const first = await ask(ready, id, key);
  expect(await ask(ready, id, key)).toEqual(first);
  await clinic.advance(31 * 60);
  expect(await ask(ready, id, key)).toEqual({ ...first, state: 'expired' });
  expect(
    await clinic.rows({ id: z.string() }, `select id from permit where participant_id = $1`, [
      ready.patient.participantId,
    ]),
  ).toHaveLength(1);
});

it('refuses the same key with another body', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const { id } = await answer(clinic, ready.patient);
  const key = randomUUID();
  await ask(ready, id, key);
  const body = { ...permitBody(ready, id), batteryPercent: 81 };
  expect(await clinic.refused(ready.patient, issuePermit, { body, key })).toMatchObject({
    status: 409,
    code: 'idempotency.other_body',
  });
});

it('refuses a second permit while one is live, and one pre-check for two permits', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const { id } = await answer(clinic, ready.patient);
  await ask(ready, id, randomUUID());
  const refusal = await clinic.refused(ready.patient, issuePermit, { body: permitBody(ready, id), key: randomUUID() });
  expect(refusal.reasons?.map(({ code }) => code)).toEqual(expect.arrayContaining(['live_permit', 'precheck_missing']));
});

it('refuses a flat battery, another device and another person’s pre-check, each by name, and writes nothing but the audit entry', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const other = await readyPatient(clinic, oona, siteId);
  const codes = async (change: Parameters<typeof refusedFor>[1]) =>
    (await refusedFor(ready, change)).reasons?.map(({ code }) => code);
  expect(await codes({ batteryPercent: 29 })).toEqual(['battery_low']);
  expect(await codes({ deviceId: other.deviceId })).toEqual(['device_unassigned']);
  expect(await codes({ precheckId: (await answer(clinic, other.patient)).id })).toEqual(['precheck_missing']);
  expect(await livePermits(ready)).toEqual([]);
  const kinds = await clinic.rows(
    { kind: z.string() },
    `select kind from audit_entry where participant_id = $1 and action = 'permit.issue'`,
    [ready.patient.participantId],
  );
  expect(kinds.map(({ kind }) => kind)).toEqual(['refusal', 'refusal', 'refusal']);
});

it('refuses a course that is somebody else’s as if it were not there', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const other = await readyPatient(clinic, oona, siteId);
  expect(await refusedFor(ready, { courseId: other.courseId })).toMatchObject({ status: 404, code: 'not_found' });
});

it('voids a live permit by an amendment, and lets no permit out before the new version is confirmed', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const permit = await permitFor(clinic, ready);
  const [version] = await clinic.rows({ id: z.string() }, `select id from prescription where course_id = $1`, [
    ready.courseId,
  ]);
  const draft = await write(clinic, oona, ready.patient, {
    amendsId: version?.id,
    reason: 'Headaches',
    dose: { intensityMilliamp: 1.5 },
  });
  await sign(clinic, oona, draft);
  expect(await stateOf(ready, permit)).toEqual(['void', 'amended']);
  const refusal = await refusedFor(ready);
  expect(refusal.reasons?.map(({ code }) => code)).toContain('prescription_unacknowledged');
});

it('voids a live permit by a pause', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const permit = await permitFor(clinic, ready);
  await clinic.call(oona, pauseCourse, {
    params: { courseId: ready.courseId },
    body: { paused: true, reason: 'Away' },
  });
  expect(await stateOf(ready, permit)).toEqual(['void', 'paused']);
});

it('keeps the dose of an unused permit reserved until the stimulator’s own record shows that it never ran', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const permit = await permitFor(clinic, ready);
  await clinic.advance(31 * 60);
  expect((await refusedFor(ready)).reasons?.map(({ code }) => code)).toContain('session_open');
  const unused = {
    kind: 'ended',
    atSeconds: 0,
    reason: 'permit_void',
    onSeconds: 0,
    chargeCoulomb: 0,
    lastSequence: 0,
  } as const;
  expect(await send(clinic, ready.patient, permit, numbered([unused]))).toMatchObject({
    sessionState: 'void',
    permit: { state: 'expired' },
  });
  expect((await permitFor(clinic, ready)).sessionNumber).toBe(1);
});

it('gives the next permit a higher counter', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const first = await permitFor(clinic, ready);
  await send(
    clinic,
    ready.patient,
    first,
    numbered([
      { kind: 'ended', atSeconds: 0, reason: 'device_fault', onSeconds: 0, chargeCoulomb: 0, lastSequence: 0 },
    ]),
  );
  await clinic.advance(31 * 60);
  expect((await permitFor(clinic, ready)).counter).toBe(first.counter + 1);
});

it('gives out at most ten permits an hour', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  for (let time = 0; time < 10; time += 1) {
    const permit = await permitFor(clinic, ready);
    await send(
      clinic,
      ready.patient,
      permit,
      numbered([
        { kind: 'ended', atSeconds: 0, reason: 'device_fault', onSeconds: 0, chargeCoulomb: 0, lastSequence: 0 },
      ]),
    );
    await clinic.client.pool.query(`update permit set closed_at = $2, closed_why = 'expired' where id = $1`, [
      permit.id,
      await clinic.now(),
    ]);
  }
  expect(await refusedFor(ready)).toMatchObject({ status: 409, code: 'permit.too_many' });
  await clinic.advance(3600);
  expect((await permitFor(clinic, ready)).state).toBe('live');
});

it('leaves a planned session open after one that was not delivered', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const permit = await permitFor(clinic, ready);
  await clinic.advance(120);
  await send(clinic, ready.patient, permit, wholeRun(permit, 60, 'stopped'));
  const [planned] = await clinic.rows(
    { closed_at: z.null() },
    `select closed_at from planned_session where id = (select planned_session_id from session where id = $1)`,
    [permit.sessionId],
  );
  expect(planned?.closed_at).toBeNull();
});

it('asks the limits of today, not those of the day of the signature', async () => {
  const strict = await clinic.site('TL');
  const clinician = await clinic.staff('Nell Amis', 'clinician', strict);
  const admin = await clinic.staff('Ada Admin', 'administrator', strict);
  const ready = await readyPatient(clinic, clinician, strict);
  const [{ settings } = { settings: null }] = (await clinic.call(admin, listProtocols, {})).items;
  if (settings === null) throw new Error('no protocol');
  const limits = { ...settings.limits, routineCurrentMilliamp: 1, mostCurrentMilliamp: 1.5 };
  const body = { siteId: strict, basedOnVersion: 1, reason: 'Tighter', password: 'the password again' };
  await clinic.call(admin, changeProtocol, { body: { ...body, settings: { ...settings, limits } } });
  const { id } = await answer(clinic, ready.patient);
  const refusal = await clinic.refused(ready.patient, issuePermit, { body: permitBody(ready, id), key: randomUUID() });
  expect(refusal.reasons).toEqual([
    expect.objectContaining({ code: 'dose_above_limit', subject: 'current', layer: 'site', value: 2, limit: 1.5 }),
  ]);
});
