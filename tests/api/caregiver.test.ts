// Caregivers: invited and removed by the person, who alone decides what each sees.

import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { giveCaregiverAccount, insertAccount } from '@/db/queries/account';
import { listHelperCodes } from '@/db/queries/caregiver';
import type { AccountActor } from '@/server/action';
import { verifyCode } from '@/server/caregiver-code';
import { changeShares } from '@/server/features/caregiver/change-shares';
import { inviteCaregiver } from '@/server/features/caregiver/invite-caregiver';
import { listCaregivers } from '@/server/features/caregiver/list-caregivers';
import { readShared } from '@/server/features/caregiver/read-shared';
import { readSharedDiary } from '@/server/features/caregiver/read-shared-diary';
import { removeCaregiver } from '@/server/features/caregiver/remove-caregiver';
import { setCaregiverCode } from '@/server/features/caregiver/set-caregiver-code';
import { withdrawParticipant } from '@/server/features/participant/withdraw-participant';
import { openClinic, type Clinic, type Patient } from '../support/clinic';
import { inForce } from '../support/prescribing';
import { keepDiary } from '../support/records';
import { recordSession } from '../support/sessions';

let clinic: Clinic;
let siteId: string;
let clinician: AccountActor;

beforeAll(async () => {
  clinic = await openClinic();
  siteId = await clinic.site('LS');
  clinician = await clinic.staff('Cora Clinician', 'clinician', siteId);
});
afterAll(() => clinic.close());

const nothing = { adherence: false, diary: false, missedMail: false };
const invitation = (email: string, shares = nothing) => ({ body: { name: 'Tam Marlow', email, shares } });

/** The caregiver as one who has accepted; accepting itself is tested with accounts. */
async function invited(patient: Patient, shares = nothing): Promise<{ id: string; caregiver: AccountActor }> {
  const email = `${randomUUID()}@harrowmere.example`;
  const { id } = await clinic.call(patient, inviteCaregiver, invitation(email, shares));
  const accountId = randomUUID();
  const createdAt = await clinic.now();
  const { db } = clinic.client;
  const row = { id: accountId, credentialId: randomUUID(), role: 'caregiver' as const, name: 'Tam Marlow', email };
  await insertAccount(db, { ...row, passwordHash: 'none', language: 'en', createdAt });
  await giveCaregiverAccount(db, id, accountId, createdAt);
  const caregiver: AccountActor = {
    ...{ kind: 'account', accountId, role: 'caregiver', name: row.name, email, language: 'en', siteIds: [] },
    participantId: null,
  };
  return { id, caregiver };
}

describe('a caregiver', () => {
  it('is invited by a mail that names nothing medical, once for one key', async () => {
    const patient = await clinic.patient('Ines Marlow', siteId);
    const email = 'tam@harrowmere.example';
    const first = await clinic.call(patient, inviteCaregiver, { ...invitation(email), key: 'invite-tam-1' });
    expect(await clinic.call(patient, inviteCaregiver, { ...invitation(email), key: 'invite-tam-1' })).toEqual(first);
    expect(first).toMatchObject({ state: 'invited', shares: nothing, mailsStopped: false, hasCode: false });
    const mails = await clinic.rows(
      { facts: z.record(z.string(), z.string()) },
      'select facts from outbox where to_email = $1',
      [email],
    );
    expect(mails).toEqual([
      { facts: { name: 'Tam Marlow', participantName: 'Ines', path: expect.stringMatching(/^\/invitation#token=/) } },
    ]);
    const again = await clinic.refused(patient, inviteCaregiver, invitation(email));
    expect(again.code).toBe('caregiver.already_invited');
  });

  it('is neither staff, nor a participant, nor one of more than five', async () => {
    const patient = await clinic.patient('Max Many', siteId);
    const other = await clinic.patient('Olga Other', siteId);
    for (const email of [clinician.email, other.email, patient.email]) {
      const refusal = await clinic.refused(patient, inviteCaregiver, invitation(email));
      expect(refusal.code).toBe('caregiver.address_is_staff_or_participant');
    }
    for (let index = 0; index < 5; index += 1)
      await clinic.call(patient, inviteCaregiver, invitation(`m${index}@harrowmere.example`));
    const sixth = await clinic.refused(patient, inviteCaregiver, invitation('m5@harrowmere.example'));
    expect(sixth.code).toBe('caregiver.too_many');
  });

  it('of five who are invited at once is never a sixth', async () => {
    const patient = await clinic.patient('Rae Race', siteId);
    const all = Array.from({ length: 8 }, (_, index) =>
      clinic.call(patient, inviteCaregiver, invitation(`r${index}@harrowmere.example`)),
    );
    const done = await Promise.allSettled(all);
    expect(done.filter(({ status }) => status === 'fulfilled')).toHaveLength(5);
  });

  it('stands in the person’s list a page at a time, and in nobody else’s', async () => {
    const patient = await clinic.patient('Lia List', siteId);
    for (const index of [0, 1, 2])
      await clinic.call(patient, inviteCaregiver, invitation(`l${index}@harrowmere.example`));
    const first = await clinic.call(patient, listCaregivers, { query: { limit: 2 } });
    const second = await clinic.call(patient, listCaregivers, { query: { limit: 2, cursor: first.nextCursor ?? '' } });
    expect([...first.items, ...second.items].map(({ email }) => email)).toEqual(
      [0, 1, 2].map((index) => `l${index}@harrowmere.example`),
    );
    expect(second.nextCursor).toBeNull();
    const other = await clinic.patient('Ole Other', siteId);
    expect((await clinic.call(other, listCaregivers, {})).items).toEqual([]);
    const params = { caregiverId: first.items[0]?.id ?? '' };
    expect((await clinic.refused(other, changeShares, { params, body: nothing })).status).toBe(404);
    expect((await clinic.refused(other, removeCaregiver, { params, body: {} })).status).toBe(404);
  });
});

describe('what a caregiver sees', () => {
  let patient: Patient;
  let id: string;
  let caregiver: AccountActor;
  const shares = (change: Partial<typeof nothing>) =>
    clinic.call(patient, changeShares, { params: { caregiverId: id }, body: { ...nothing, ...change } });
  const seen = async () => (await clinic.call(caregiver, readShared, {})).items[0];
  const diary = () => ({ params: { participantId: patient.participantId } });

  beforeAll(async () => {
    patient = await clinic.patient('Wanda Weaver', siteId);
    await inForce(clinic, clinician, patient);
    const { sessionId } = await recordSession(clinic, patient);
    const effects = [{ kind: 'tingling', strength: 3, stillThere: false }];
    await keepDiary(clinic, patient, sessionId, { effects, headacheAfter: 4, freeText: 'A secret' });
    ({ id, caregiver } = await invited(patient));
  });

  it('is nothing but a first name and the site’s number while nothing is switched on', async () => {
    expect(await seen()).toMatchObject({
      firstName: 'Wanda',
      sitePhone: '020 7946 0100',
      course: null,
      assisted: false,
    });
    expect(JSON.stringify(await seen())).not.toContain('Weaver');
    expect((await clinic.refused(caregiver, readSharedDiary, diary())).status).toBe(404);
  });

  it('is the strip without what was felt when adherence is switched on', async () => {
    await shares({ adherence: true });
    const person = await seen();
    expect(person?.course?.adherence).toMatchObject({ complete: 1, planned: 1 });
    expect(person?.course?.marks[0]).toMatchObject({ state: 'delivered', headache: null, sessionId: null });
    expect((await clinic.refused(caregiver, readSharedDiary, diary())).status).toBe(404);
  });

  it('is what was felt, without a dose or an own word, when the diary is switched on', async () => {
    await shares({ diary: true });
    expect((await seen())?.course).toBeNull();
    const { items } = await clinic.call(caregiver, readSharedDiary, diary());
    expect(items).toEqual([
      {
        number: 1,
        startedAt: expect.any(String),
        headache: 4,
        effects: [{ kind: 'tingling', strength: 3 }],
        skin: 'ok',
      },
    ]);
  });

  it('ends at once when the switch goes off', async () => {
    await shares({ diary: true });
    await shares({});
    expect((await clinic.refused(caregiver, readSharedDiary, diary())).status).toBe(404);
  });

  it('is nothing of people who never invited them', async () => {
    const other = await clinic.patient('Ole Other', siteId);
    const refusal = await clinic.refused(caregiver, readSharedDiary, {
      params: { participantId: other.participantId },
    });
    expect(refusal.status).toBe(404);
  });

  it('is kept in the person’s audit trail', async () => {
    await clinic.call(caregiver, readShared, {});
    const rows = await clinic.rows(
      { actor_role: z.string(), action: z.string() },
      `select actor_role, action from audit_entry where participant_id = $1 order by sequence desc limit 1`,
      [patient.participantId],
    );
    expect(rows).toEqual([{ actor_role: 'caregiver', action: 'caregiver.read-shared' }]);
  });

  it('is over once removed; removing again answers the same', async () => {
    await shares({ adherence: true, diary: true });
    const params = { caregiverId: id };
    const first = await clinic.call(patient, removeCaregiver, { params, body: {} });
    expect(await clinic.call(patient, removeCaregiver, { params, body: {} })).toEqual(first);
    expect((await clinic.call(caregiver, readShared, {})).items).toEqual([]);
    expect((await clinic.refused(caregiver, readSharedDiary, diary())).status).toBe(404);
    expect((await clinic.refused(patient, changeShares, { params, body: nothing })).status).toBe(404);
  });

  it('is over once the person withdrew, who then invites nobody', async () => {
    const gone = await clinic.patient('Gil Gone', siteId);
    const { caregiver: helper } = await invited(gone, { adherence: true, diary: true, missedMail: true });
    expect((await clinic.call(helper, readShared, {})).items).toHaveLength(1);
    const params = { participantId: gone.participantId };
    await clinic.call(clinician, withdrawParticipant, { params, body: { reason: 'Moves away' } });
    expect((await clinic.call(helper, readShared, {})).items).toEqual([]);
    expect((await clinic.refused(helper, readSharedDiary, { params })).status).toBe(404);
    const refusal = await clinic.refused(gone, inviteCaregiver, invitation('late@harrowmere.example'));
    expect(refusal.code).toBe('participant.withdrawn');
  });
});

describe('a caregiver’s code', () => {
  it('is kept as a hash, the newest counts, and a removed caregiver has none', async () => {
    const patient = await clinic.patient('Ada Assisted', siteId);
    const { id, caregiver } = await invited(patient);
    await clinic.call(caregiver, setCaregiverCode, { body: { code: '123456' } });
    await clinic.advance(1);
    await clinic.call(caregiver, setCaregiverCode, { body: { code: '654321' } });
    const [code] = await listHelperCodes(clinic.client.db, patient.participantId);
    expect(code).toMatchObject({ caregiverId: id, accountId: caregiver.accountId });
    expect(code?.codeHash).not.toContain('654321');
    expect(await verifyCode('654321', code?.codeHash ?? '')).toBe(true);
    expect(await verifyCode('123456', code?.codeHash ?? '')).toBe(false);
    expect(await verifyCode('654321', 'no hash')).toBe(false);
    expect((await clinic.call(patient, listCaregivers, {})).items[0]).toMatchObject({ hasCode: true, state: 'active' });
    await clinic.call(patient, removeCaregiver, { params: { caregiverId: id }, body: {} });
    expect(await listHelperCodes(clinic.client.db, patient.participantId)).toEqual([]);
  });
});
