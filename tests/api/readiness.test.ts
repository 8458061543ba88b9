// What must stand before a first session: consent, screening, training, watched sessions.

import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { insertSite } from '@/db/queries/site';
import type { AccountActor } from '@/server/action';
import { recordConsent } from '@/server/features/consent/record-consent';
import { readParticipant } from '@/server/features/participant/read-participant';
import { withdrawParticipant } from '@/server/features/participant/withdraw-participant';
import { recordScreening } from '@/server/features/screening/record-screening';
import { recordTraining } from '@/server/features/training/record-training';
import { recordWatchedSession } from '@/server/features/training/record-watched-session';
import { openClinic, type Clinic, type Patient } from '../support/clinic';
import { consentForm, screeningForm, trainingForm } from '../support/records';

const daySeconds = 86_400;

let clinic: Clinic;
let clinician: AccountActor;
let coordinator: AccountActor;
let stranger: AccountActor;
let patient: Patient;
let params: { participantId: string };

beforeAll(async () => {
  clinic = await openClinic();
  const siteId = await clinic.site('LS');
  clinician = await clinic.staff('Cora Clinician', 'clinician', siteId);
  coordinator = await clinic.staff('Cleo Coordinator', 'coordinator', siteId);
  stranger = await clinic.staff('Otto Other', 'clinician', await clinic.site('MR'));
  patient = await clinic.patient('Ines Marlow', siteId);
  params = { participantId: patient.participantId };
});
afterAll(() => clinic.close());

const readiness = async () => (await clinic.call(clinician, readParticipant, { params })).readiness;
const paths = ({ fields }: { fields?: readonly { path: string }[] }) => fields?.map(({ path }) => path);

describe('consent', () => {
  it('is none until every understanding is there', async () => {
    const body = { ...consentForm, understandsRisks: false, copyGiven: false };
    const refusal = await clinic.refused(coordinator, recordConsent, { params, body });
    expect([refusal.code, paths(refusal)]).toEqual(['consent.not_given', ['understandsRisks', 'copyGiven']]);
    expect((await readiness()).consent).toBe('missing');
  });

  it('is of a document that the protocol knows, signed on a day that has come', async () => {
    const newer = await clinic.refused(coordinator, recordConsent, {
      params,
      body: { ...consentForm, documentVersion: 2 },
    });
    expect(newer.code).toBe('consent.version_unknown');
    const later = await clinic.refused(coordinator, recordConsent, {
      params,
      body: { ...consentForm, signedOn: '2999-01-01' },
    });
    expect(later.code).toBe('consent.signed_in_future');
  });

  it('is current once recorded, and once for one key', async () => {
    const first = await clinic.call(coordinator, recordConsent, { params, body: consentForm, key: 'consent-1-key' });
    const again = await clinic.call(coordinator, recordConsent, { params, body: consentForm, key: 'consent-1-key' });
    expect(again).toEqual(first);
    expect((await readiness()).consent).toBe('current');
    const rows = await clinic.rows({ document_version: z.string() }, 'select document_version from consent');
    expect(rows).toEqual([{ document_version: '1' }]);
  });
});

describe('screening', () => {
  it('over a relative item is a clinician’s, and needs the reason', async () => {
    const reasoned = screeningForm({ seizure_ever: { answer: 'yes', reason: 'One febrile seizure at two years' } });
    const byCoordinator = await clinic.refused(coordinator, recordScreening, { params, body: reasoned });
    expect([byCoordinator.code, paths(byCoordinator)]).toEqual([
      'screening.clinician_decides',
      ['answers.seizure_ever'],
    ]);
    const bare = screeningForm({ seizure_ever: { answer: 'yes' } });
    expect((await clinic.refused(clinician, recordScreening, { params, body: bare })).code).toBe(
      'screening.reason_missing',
    );
    expect((await clinic.call(clinician, recordScreening, { params, body: reasoned })).outcome).toBe('clear');
  });

  it('takes no item that is not on the list', async () => {
    const body = screeningForm({ shoe_size: { answer: 'no' } });
    expect((await clinic.refused(coordinator, recordScreening, { params, body })).code).toBe('screening.item_unknown');
  });

  it('excludes by an absolute item, and counts by its newest form', async () => {
    const excluded = screeningForm({ head_implant: { answer: 'yes' } });
    expect((await clinic.call(coordinator, recordScreening, { params, body: excluded })).outcome).toBe('excluded');
    expect((await readiness()).screening).toBe('excluded');
    const open = screeningForm({ head_implant: { answer: 'not_known' } });
    expect((await clinic.call(coordinator, recordScreening, { params, body: open })).outcome).toBe('incomplete');
    await clinic.call(coordinator, recordScreening, { params, body: screeningForm() });
    expect((await readiness()).screening).toBe('clear');
  });
});

describe('training', () => {
  it('is signed off by all its skills together', async () => {
    const body = { ...trainingForm, skills: { ...trainingForm.skills, emergency: false } };
    const partly = await clinic.call(coordinator, recordTraining, { params, body });
    expect(partly).toMatchObject({ signedOff: false, open: ['emergency'], validUntil: null });
    expect((await readiness()).training).toBe('missing');
    const whole = await clinic.call(coordinator, recordTraining, { params, body: trainingForm });
    expect(whole).toMatchObject({ signedOff: true, open: [] });
    expect((await readiness()).training).toBe('signed_off');
  });

  it('knows its skills and items', async () => {
    const skills = { ...trainingForm.skills, juggling: true };
    const refusal = await clinic.refused(coordinator, recordTraining, { params, body: { ...trainingForm, skills } });
    expect([refusal.code, paths(refusal)]).toEqual(['training.skill_unknown', ['skills.juggling']]);
    const capability = { ...trainingForm.capability, patience: true };
    const other = await clinic.refused(coordinator, recordTraining, { params, body: { ...trainingForm, capability } });
    expect(paths(other)).toEqual(['capability.patience']);
  });

  it('counts watched sessions that were tolerated in a known way, and none for watching now', async () => {
    const done = { where: 'clinic', when: 'done' } as const;
    const refusal = await clinic.refused(coordinator, recordWatchedSession, { params, body: done });
    expect([refusal.code, paths(refusal)]).toEqual(['training.tolerability_missing', ['tolerated']]);
    const now = { where: 'live_video', when: 'now' } as const;
    expect(await clinic.call(coordinator, recordWatchedSession, { params, body: now })).toMatchObject({
      watched: 0,
      required: 1,
    });
    const well = { ...done, tolerated: 'well' } as const;
    expect(await clinic.call(coordinator, recordWatchedSession, { params, body: well })).toMatchObject({
      watched: 1,
      required: 1,
    });
    expect((await readiness()).watched).toEqual({ done: 1, required: 1 });
  });
});

it('ends by time: the screening after 90 days, the sign-off after 180', async () => {
  await clinic.advance(90 * daySeconds - 60);
  expect(await readiness()).toMatchObject({ screening: 'clear', training: 'signed_off' });
  await clinic.advance(120);
  expect(await readiness()).toMatchObject({ screening: 'expired', training: 'signed_off' });
  await clinic.advance(90 * daySeconds);
  expect(await readiness()).toMatchObject({ screening: 'expired', training: 'expired' });
});

describe('for each of the four', () => {
  const forms = [
    ['consent', (who: AccountActor) => clinic.refused(who, recordConsent, { params, body: consentForm })],
    ['screening', (who: AccountActor) => clinic.refused(who, recordScreening, { params, body: screeningForm() })],
    ['training', (who: AccountActor) => clinic.refused(who, recordTraining, { params, body: trainingForm })],
    [
      'a watched session',
      (who: AccountActor) =>
        clinic.refused(who, recordWatchedSession, {
          params,
          body: { where: 'clinic', when: 'done', tolerated: 'well' },
        }),
    ],
  ] as const;

  it.each(forms)('%s of another site’s person is not there', async (_, record) => {
    expect((await record(stranger)).status).toBe(404);
  });

  it.each(forms)('%s waits for the site’s protocol', async (_, record) => {
    const bareSite = randomUUID();
    const code = bareSite.slice(0, 8).toUpperCase();
    const phone = '020 7946 0300';
    const place = { name: 'Bare', kind: 'service', phone, emergencyNumber: '999', zone: 'Europe/London' } as const;
    await insertSite(clinic.client.db, { id: bareSite, code, ...place, createdAt: await clinic.now() });
    const before = params;
    const who = await clinic.staff('Bea Bare', 'clinician', bareSite);
    params = { participantId: (await clinic.patient('Ben Bare', bareSite)).participantId };
    expect((await record(who)).code).toBe('protocol.none');
    params = before;
  });

  it.each(forms)('%s is not recorded once the person has withdrawn', async (_, record) => {
    const before = params;
    const gone = await clinic.patient('Gil Gone', coordinator.siteIds[0] ?? '');
    params = { participantId: gone.participantId };
    await clinic.call(coordinator, withdrawParticipant, { params, body: { reason: 'Moves away' } });
    expect((await record(coordinator)).code).toBe('participant.withdrawn');
    params = before;
  });
});
