// Electronic signatures: who, what for, when, the password given for it, and the bytes. What was altered behind the server's back is shown
// as invalid, and no session starts on it.
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { readClearance } from '@/server/features/clearance/read-clearance';
import { sendMessage } from '@/server/features/message/send-message';
import { issuePermit } from '@/server/features/permit/issue-permit';
import { listPrescriptions } from '@/server/features/prescription/list-prescriptions';
import { readPrescription } from '@/server/features/prescription/read-prescription';
import { changeProtocol } from '@/server/features/protocol/change-protocol';
import { listProtocols } from '@/server/features/protocol/list-protocols';
import { listReviews } from '@/server/features/review/list-reviews';
import { recordReview } from '@/server/features/review/record-review';
import { openClinic, type Clinic } from '../support/clinic';
import { openTestHouse, password } from '../support/house';
import { pastTheGuards } from '../support/postgres';
import { signatureOn, write } from '../support/prescribing';
import { answer, goToMorning, permitBody, readyPatient, type ReadyPatient, openMorning } from '../support/running';

let clinic: Clinic;
let siteId: string;
let oona: AccountActor;

beforeAll(async () => {
  ({ clinic, siteId, oona } = await openMorning());
}, 60_000);
afterAll(() => clinic.close());

const again = 'checked by the door';

/** Changes a row as nobody may, past triggers and rights. */
const alter = (table: string, set: string, id: string) =>
  pastTheGuards(clinic.client, async (client) => {
    await client.query('set session_replication_role = replica');
    const { rowCount } = await client.query(`update ${table} set ${set} where id = $1`, [id]);
    expect(rowCount).toBe(1);
  });

async function inForceOf({ courseId }: ReadyPatient): Promise<string> {
  const [row] = await clinic.rows(
    { id: z.string() },
    'select id from prescription where course_id = $1 and signed_at is not null and closed_at is null',
    [courseId],
  );
  return row?.id ?? '';
}

const versionOf = (id: string) => clinic.call(oona, readPrescription, { params: { prescriptionId: id } });
const codesFor = async ({ patient }: ReadyPatient) =>
  (await clinic.call(patient, readClearance, { query: {} })).reasons.map(({ code }) => code);

describe('a signed prescription', () => {
  it('says who signed, what for, when, when the password was given, and which bytes', async () => {
    const ready = await readyPatient(clinic, oona, siteId);
    const id = await inForceOf(ready);
    const version = await versionOf(id);
    expect(version).toMatchObject({
      isIntact: true,
      signatures: [{ name: 'Oona Feld', role: 'clinician', meaning: 'prescribed', contentHash: version.contentHash }],
    });
    const [row] = await clinic.rows(
      { seconds: z.coerce.number() },
      'select extract(epoch from created_at - confirmed_at) as seconds from signature where subject_id = $1',
      [id],
    );
    expect(row?.seconds).toBeGreaterThanOrEqual(0);
    expect(row?.seconds).toBeLessThanOrEqual(300);
    expect(await codesFor(ready)).not.toContain('prescription_altered');
  });

  it.each([
    ['current', 'intensity_ua = 1900'],
    ['hold and with it the time', 'hold_ms = hold_ms - 1000, on_ms = on_ms - 1000'],
    ['electrodes', `electrodes = jsonb_set(electrodes, '{0,position}', '"F4"')`],
    ['hours', `hours_from = '01:00'`],
    ['number of sessions', 'sessions_total = sessions_total + 1'],
    ['reason', `reason = 'another'`],
    ['assistance', 'assisted = not assisted'],
    ['hash itself', `content_hash = 'x'`],
  ])('whose %s was altered is shown as invalid, and nothing starts on it', async (_what, set) => {
    const ready = await readyPatient(clinic, oona, siteId);
    const id = await inForceOf(ready);
    const { id: precheckId } = await answer(clinic, ready.patient);
    await alter('prescription', set, id);
    expect((await versionOf(id)).isIntact).toBe(false);
    const params = { participantId: ready.patient.participantId };
    const { items } = await clinic.call(oona, listPrescriptions, { params, query: {} });
    expect(items.find((one) => one.id === id)?.isIntact).toBe(false);
    expect(await codesFor(ready)).toContain('prescription_altered');
    const refusal = await clinic.refused(ready.patient, issuePermit, {
      body: permitBody(ready, precheckId),
      key: randomUUID(),
    });
    expect(refusal.reasons).toContainEqual(
      expect.objectContaining({ code: 'prescription_altered', resolvedBy: 'clinician' }),
    );
  });

  it('whose signature was put over other bytes is invalid too, and so is one whose signatures are gone', async () => {
    const [other, without] = [await readyPatient(clinic, oona, siteId), await readyPatient(clinic, oona, siteId)];
    await pastTheGuards(clinic.client, async (client) => {
      await client.query('set session_replication_role = replica');
      await client.query(`update signature set content_hash = 'x' where subject_id = $1`, [await inForceOf(other)]);
      await client.query('delete from signature where subject_id = $1', [await inForceOf(without)]);
    });
    expect((await versionOf(await inForceOf(other))).isIntact).toBe(false);
    expect((await versionOf(await inForceOf(without))).isIntact).toBe(false);
    for (const ready of [other, without]) expect(await codesFor(ready)).toContain('prescription_altered');
  });

  it('says of the reason in plain words who must act', async () => {
    const ready = await readyPatient(clinic, oona, siteId);
    await alter('prescription', 'intensity_ua = 1900', await inForceOf(ready));
    const { reasons } = await clinic.call(ready.patient, readClearance, { query: {} });
    expect(reasons.find(({ code }) => code === 'prescription_altered')).toMatchObject({
      sentence: 'The prescription is not as it was signed. Your clinician must write and sign it again.',
    });
  });
});

/** A message of the person's, looked at and closed. */
async function reviewed(at: Clinic, clinician: AccountActor, { patient }: ReadyPatient): Promise<string> {
  await at.call(patient, sendMessage, { body: { text: 'Hello' } });
  const [item] = await at.rows(
    { id: z.string() },
    `select id from worklist_item where participant_id = $1 and matter = 'message' and closed_at is null`,
    [patient.participantId],
  );
  const said = { finding: 'Fine', decision: 'done', reason: 'Called', password: again } as const;
  return (await at.call(clinician, recordReview, { body: { itemId: item?.id ?? '', ...said } })).id;
}

it('a signed review is shown as invalid once its words were altered', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const id = await reviewed(clinic, oona, ready);
  const params = { participantId: ready.patient.participantId };
  const read = async () => (await clinic.call(oona, listReviews, { params, query: {} })).items[0];
  expect(await read()).toMatchObject({ id, isIntact: true });
  await alter('review', `finding = 'Not fine'`, id);
  expect(await read()).toMatchObject({ id, isIntact: false });
});

describe('the database', () => {
  const add = (change: Record<string, unknown>) =>
    clinic.client.pool
      .query(
        `insert into signature select (jsonb_populate_record(s, $1::jsonb)).* from signature s
          join prescription p on p.id = s.subject_id and p.content_hash = s.content_hash limit 1`,
        [JSON.stringify({ id: randomUUID(), account_id: randomUUID(), meaning: 'second_signature', ...change })],
      )
      .then(() => null)
      .catch((error: Error & { constraint?: string }) => error.constraint ?? error.message);

  it('takes no signature on bytes that are not there, and none without the password within the last five minutes', async () => {
    const at = (minutes: number) => new Date(Date.parse('2026-05-12T10:00:00Z') + minutes * 60_000).toISOString();
    expect([
      await add({ content_hash: 'x' }),
      await add({ subject_id: randomUUID() }),
      await add({ created_at: at(0), confirmed_at: null }),
      await add({ created_at: at(0), confirmed_at: at(0.01) }),
      await add({ created_at: at(0), confirmed_at: at(-5.001) }),
      await add({ created_at: at(0), confirmed_at: at(-5) }),
    ]).toEqual([
      ...['signature_content', 'signature_content'],
      expect.stringContaining('confirmed_at'),
      ...['signature_confirmed', 'signature_confirmed', null],
    ]);
  });

  it('holds no signed row without a signature given with the password for exactly these bytes', async () => {
    const clean = await openClinic();
    try {
      await goToMorning(clean);
      const site = await clean.site('LS');
      const clinician = await clean.staff('Oona Feld', 'clinician', site);
      const ready = await readyPatient(clean, clinician, site);
      await reviewed(clean, clinician, ready);
      const admin = await clean.staff('Ada Hale', 'administrator', site);
      const { items } = await clean.call(admin, listProtocols, { query: { siteId: site } });
      const [current] = items;
      if (!current) throw new Error('the site has a protocol');
      const { settings, version } = current;
      await clean.call(admin, changeProtocol, {
        body: { siteId: site, settings, reason: 'Reviewed', basedOnVersion: version, password: again },
      });
      const signed = await clean.rows(
        { kind: z.string(), by: z.number() },
        `with signed as (
           select 'prescription' as kind, id, content_hash from prescription where signed_at is not null
           union all select 'review', id, content_hash from review
           -- The first one of a test's site is put there without anybody.
           union all select 'protocol', id, content_hash from protocol where version > 1)
         select kind, (select count(*)::int from signature s where s.subject_id = signed.id and s.subject_kind = signed.kind
           and s.content_hash = signed.content_hash and s.confirmed_at between s.created_at - interval '5 minutes' and s.created_at) as by
         from signed order by 1`,
      );
      expect(signed).toEqual([
        { kind: 'prescription', by: 1 },
        { kind: 'protocol', by: 1 },
        { kind: 'review', by: 1 },
      ]);
    } finally {
      await clean.close();
    }
  });
});

it('asks for the password at the door: without the right one nothing is signed', async () => {
  const at = await openTestHouse();
  try {
    const site = await at.site('LS');
    const person = await at.person('clinician', site);
    const browser = await at.inSession(person.accountId);
    const draft = await write(clinic, oona, await clinic.patient('Ines Marlow', siteId));
    const { params, body } = signatureOn(draft);
    const sign = (given: string) =>
      browser.post(`/api/prescriptions/${params.prescriptionId}/sign`).send({ ...body, password: given });
    expect((await sign('not my password at all')).body.fields).toEqual([
      expect.objectContaining({ path: 'password', code: 'password_wrong' }),
    ]);
    // With it the door opens, and finds nothing of that id in this house.
    expect((await sign(password)).status).toBe(404);
    expect(await at.rows('select 1 from signature')).toEqual([]);
  } finally {
    await at.close();
  }
});
