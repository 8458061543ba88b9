// Many at once, over HTTP: one permit, one signature, one account, and a trail that still adds up.

import { randomUUID } from 'node:crypto';
import { genesisHash, hashOf, listChain } from '@/db/queries/audit';
import { acceptInvitation } from '@/shared/contracts/account';
import { inviteCaregiver } from '@/shared/contracts/caregiver';
import { issuePermit } from '@/shared/contracts/permit';
import { signPrescription } from '@/shared/contracts/prescription';
import { writeDiary } from '@/shared/contracts/session';
import { enrolParticipant } from '@/shared/contracts/participant';
import { z } from 'zod';
import { password } from '../support/house';
import { knockAt } from '../support/knock';
import { answer, permitBody } from '../support/running';
import { invite, samples } from '../support/samples';
import { clearTheWay } from '../support/whole-record';
import { openWorld, type World } from '../support/world';

let world: World;

beforeAll(async () => {
  world = await openWorld();
}, 120_000);
afterAll(() => world.close());

const times = <T>(count: number, make: (index: number) => T) =>
  Array.from({ length: count }, (_, index) => make(index));
type Said = { status: number; body: { code?: string; id?: string; reasons?: { code: string }[] } };
const outcomes = (answers: readonly Said[]) =>
  answers.map(({ status, body }) => (status < 400 ? String(status) : `${status} ${body.code ?? ''}`)).sort();

/** Every link of a chain, recomputed from the entries alone. */
async function chainProblems(chain: string): Promise<{ length: number; problems: string[] }> {
  const entries = await listChain(world.clinic.client.db, chain, 0, 10_000);
  const problems: string[] = [];
  let previous = genesisHash;
  for (const [index, { sequence, previousHash, hash, participantCode: _shown, ...entry }] of entries.entries()) {
    if (sequence !== index + 1) problems.push(`${sequence} stands at place ${index + 1}`);
    if (previousHash !== previous) problems.push(`${sequence} does not follow the one before`);
    if (hashOf(previousHash, entry) !== hash) problems.push(`${sequence} says something else than its hash`);
    previous = hash;
  }
  const [head] = await world.clinic.rows(
    { hash: z.string(), n: z.number() },
    'select hash, sequence::int n from audit_head where chain = $1',
    [chain],
  );
  if (head?.hash !== previous || head.n !== entries.length) problems.push('the head is another one');
  return { length: entries.length, problems };
}

it('lets one of two who write the same diary page do so', async () => {
  const browser = await world.as('participant, self');
  const [sample] = samples.writeDiary;
  const asked = await sample?.ask(world, 'participant, self');
  const answers = await Promise.all(times(2, () => knockAt(browser, writeDiary, asked ?? {}, randomUUID())));
  expect(outcomes(answers)).toEqual(['201', '409 diary.already_written']);
});

it('gives one permit to fifty who ask at once, and tells the others that one is live', async () => {
  const browser = await world.as('participant, self');
  const asked = { body: await clearTheWay(world.clinic, world.record) };
  const answers = await Promise.all(times(50, () => knockAt(browser, issuePermit, asked, randomUUID())));
  expect(outcomes(answers)).toEqual(['201', ...times(49, () => '409 clearance.refused')]);
  for (const { status, body } of answers) {
    if (status === 409) expect(body.reasons.map(({ code }: { code: string }) => code)).toContain('live_permit');
  }
  const live = await world.clinic.rows(
    { id: z.string() },
    'select id from permit where participant_id = $1 and closed_at is null',
    [world.record.patient.participantId],
  );
  expect(live.map(({ id }) => id)).toEqual([answers.find(({ status }) => status === 201)?.body.id]);
}, 60_000);

it('gives twenty who ask at once with one key the same permit', async () => {
  const { clinic, spare } = world;
  const { id: precheckId } = await answer(clinic, spare.patient);
  const asked = { body: permitBody(spare, precheckId) };
  const browser = await world.signIn(spare.patient.email);
  const key = randomUUID();
  const answers = await Promise.all(times(20, () => knockAt(browser, issuePermit, asked, key)));
  expect(outcomes(answers)).toEqual(times(20, () => '201'));
  expect(new Set(answers.map(({ body }) => body.id)).size).toBe(1);
  const given = 'select id from permit where participant_id = $1';
  expect(await clinic.rows({ id: z.string() }, given, [spare.patient.participantId])).toHaveLength(1);
}, 60_000);

it('takes one of eight signatures on a draft that come at once', async () => {
  const [sample] = samples.signPrescription;
  const asked = await sample?.ask(world, 'clinician, own site');
  const browser = await world.as('clinician, own site');
  const answers = await Promise.all(times(8, () => knockAt(browser, signPrescription, asked ?? {}, randomUUID())));
  expect(outcomes(answers)).toEqual(['200', ...times(7, () => '409 prescription.already_signed')]);
  const signatures = await world.clinic.rows({ id: z.string() }, 'select id from signature where subject_id = $1', [
    asked?.params?.prescriptionId,
  ]);
  expect(signatures).toHaveLength(1);
});

it('takes one of the signatures of two clinicians who sign at once', async () => {
  const { clinic, siteId, people } = world;
  const second = await clinic.staff('Second Signer', 'clinician', siteId);
  await clinic.client.pool.query(
    'update auth_credential set password = (select password from auth_credential where user_id = $1) where user_id = $2',
    [people['clinician, own site'].accountId, second.accountId],
  );
  const asked = await samples.signPrescription[0]?.ask(world, 'clinician, own site');
  const browsers = [await world.as('clinician, own site'), await world.signIn(second.email)];
  const answers = await Promise.all(
    times(8, (index) => knockAt(browsers[index % 2] ?? world.bare(), signPrescription, asked ?? {}, randomUUID())),
  );
  expect(outcomes(answers)).toEqual(['200', ...times(7, () => '409 prescription.already_signed')]);
  const inForce = 'select id from prescription where id = $1 and version = 1 and closed_at is null';
  expect(await clinic.rows({ id: z.string() }, inForce, [asked?.params?.prescriptionId])).toHaveLength(1);
});

it('makes one account of an invitation that is accepted twice at once', async () => {
  const email = `twice.${randomUUID()}@harrowmere.example`;
  const body = { token: await invite(world, { email }), name: 'Nell Carder', password, language: 'en' };
  const browser = await world.as('anyone');
  const answers = await Promise.all(times(4, () => knockAt(browser, acceptInvitation, { body })));
  expect(outcomes(answers)).toEqual(['201', ...times(3, () => '409 invitation.used')]);
  const accounts = await world.clinic.rows({ id: z.string() }, 'select id from account where email = $1', [email]);
  expect(accounts).toHaveLength(1);
});

it('enrols one person of an address for which ten ask at once', async () => {
  const [sample] = samples.enrolParticipant;
  const asked = await sample?.ask(world, 'clinician, own site');
  const browsers = [await world.as('clinician, own site'), await world.as('coordinator, own site')];
  const answers = await Promise.all(
    times(10, (index) => knockAt(browsers[index % 2] ?? world.bare(), enrolParticipant, asked ?? {}, randomUUID())),
  );
  expect(outcomes(answers)).toEqual(['201', ...times(9, () => '409 participant.address_taken')]);
});

it('answers ten who repeat one key alike, and does the work once', async () => {
  const [sample] = samples.inviteCaregiver;
  const asked = await sample?.ask(world, 'participant, self');
  const browser = await world.as('participant, self');
  const key = randomUUID();
  const answers = await Promise.all(times(10, () => knockAt(browser, inviteCaregiver, asked ?? {}, key)));
  expect(outcomes(answers)).toEqual(times(10, () => '201'));
  expect(new Set(answers.map(({ text }) => text)).size).toBe(1);
  const invited = await world.clinic.rows({ id: z.string() }, 'select id from caregiver where email = $1', [
    asked?.body?.email,
  ]);
  expect(invited).toHaveLength(1);
});

it('keeps a trail, after all of these, in which every link can be computed again', async () => {
  const own = await chainProblems(`participant:${world.record.patient.participantId}`);
  expect(own.problems).toEqual([]);
  expect(own.length).toBeGreaterThan(80);
  const ofSite = await chainProblems(`site:${world.siteId}`);
  expect(ofSite.problems).toEqual([]);
  expect(ofSite.length).toBeGreaterThan(5);
});
