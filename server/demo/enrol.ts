// How a person of the demo comes to a first session: enrolled, invited, consented, screened, trained, watched, equipped, prescribed.

import { z } from 'zod';
import { act, Anything, personOf, WithId } from '@/server/demo/act';
import { addressOf, phoneOf, type CastMember } from '@/server/demo/cast';
import { demoPassword } from '@/server/demo/demo-password';
import { accept } from '@/server/demo/invite';
import { dayMilliseconds } from '@/server/demo/times';
import type { Story } from '@/server/demo/story';
import type { AccountActor } from '@/server/action';
import { changeShares } from '@/server/features/caregiver/change-shares';
import { inviteCaregiver } from '@/server/features/caregiver/invite-caregiver';
import { setCaregiverCode } from '@/server/features/caregiver/set-caregiver-code';
import { recordConsent } from '@/server/features/consent/record-consent';
import { addDevice } from '@/server/features/device/add-device';
import { assignDevice } from '@/server/features/device/assign-device';
import { enrolParticipant } from '@/server/features/participant/enrol-participant';
import { acknowledgePrescription } from '@/server/features/prescription/acknowledge-prescription';
import { signPrescription } from '@/server/features/prescription/sign-prescription';
import { writePrescription } from '@/server/features/prescription/write-prescription';
import { recordScreening } from '@/server/features/screening/record-screening';
import { giveSupply } from '@/server/features/supply/give-supply';
import { recordTraining } from '@/server/features/training/record-training';
import { recordWatchedSession } from '@/server/features/training/record-watched-session';
import { capabilityItems, screeningItems, trainingSkills } from '@/shared/rules/screening';
import { localMoment } from '@/shared/values/zone';

export interface Enrolled {
  id: string;
  email: string;
  /** Day of the newest sponges, to give new ones in time. */
  spongesOn: string | null;
  spongeUses: number;
}

export const zone = 'Europe/London';
export const helperCode = '482913';
const coordinators = { LS: 'coordinator@harrowmere.example', MR: 'research.coordinator@harrowmere.example' } as const;
const clinicians = { LS: 'clinician@harrowmere.example', MR: 'research.clinician@harrowmere.example' } as const;

export const coordinatorOf = (story: Story, { site }: CastMember): Promise<AccountActor> => personOf(story.house, coordinators[site]);
export const clinicianOf = (story: Story, { site }: CastMember): Promise<AccountActor> => personOf(story.house, clinicians[site]);

/** Today where the demo's people live. */
export async function today(story: Story, plusDays = 0): Promise<string> {
  return localMoment(Date.parse(await story.house.transact.now()) + plusDays * dayMilliseconds, zone).date;
}

export async function enrol(story: Story, member: CastMember, index: number): Promise<Enrolled> {
  const email = addressOf(member);
  const body = {
    siteId: story.siteIds[member.site],
    name: member.name,
    email,
    phone: phoneOf(index),
    bornOn: member.born,
    zone,
    language: 'en',
    emergencyContact: { name: member.caregiver?.name ?? `Kin of ${member.name}`, phone: phoneOf(index + 200) },
  };
  const { id } = await act(story.house, enrolParticipant, await coordinatorOf(story, member), { body }, WithId);
  return { id, email, spongesOn: null, spongeUses: 0 };
}

const allTrue = (ids: readonly string[]) => Object.fromEntries(ids.map((id) => [id, true]));

export async function giveSupplies(story: Story, member: CastMember, person: Enrolled): Promise<void> {
  const coordinator = await coordinatorOf(story, member);
  const openedOn = await today(story);
  for (const kind of ['sponge', 'saline'] as const) {
    const body = { kind, lot: `${kind === 'sponge' ? 'SP' : 'SA'}-${openedOn.replaceAll('-', '').slice(2)}`, openedOn };
    await act(story.house, giveSupply, coordinator, { params: { participantId: person.id }, body }, Anything);
  }
  person.spongesOn = openedOn;
  person.spongeUses = 0;
}

/** Who is still in training has an account, a consent and a part of the rest, each a little further. */
export async function makeReady(story: Story, member: CastMember, person: Enrolled, index: number): Promise<void> {
  const { house } = story;
  await accept(house, person.email, member.name);
  const coordinator = await coordinatorOf(story, member);
  const params = { participantId: person.id };
  const inTraining = member.fate === 'training';
  const consent = {
    ...{ kind: 'own', documentVersion: 1, signedOn: await today(story), understandsPurpose: true, understandsRisks: true },
    ...{ understandsMayStop: true, agreesToDataUse: true, agreesToPhotos: true, questionsAnswered: true, copyGiven: true },
  };
  await act(house, recordConsent, coordinator, { params, body: consent }, Anything);
  if (inTraining && index % 3 === 0) return;
  const answers = Object.fromEntries(screeningItems.map(({ id }) => [id, { answer: 'no' as const }]));
  await act(house, recordScreening, coordinator, { params, body: { answers, seizureHistory: false } }, Anything);
  if (inTraining && index % 3 === 1) return;
  const training = { skills: allTrue(trainingSkills), capability: allTrue(capabilityItems) };
  await act(house, recordTraining, coordinator, { params, body: training }, Anything);
  if (inTraining) return;
  const watched = { where: 'clinic', when: 'done', tolerated: 'well' };
  await act(house, recordWatchedSession, coordinator, { params, body: watched }, Anything);
  const serial = `${member.site}${String(index + 1).padStart(4, '0')}`;
  const device = { siteId: story.siteIds[member.site], label: `Stimulator ${index + 1}`, model: 'Two-channel home stimulator (simulated)', serial, firmware: '1.4.0', calibrationDueOn: await today(story, 300) };
  const made = await act(house, addDevice, coordinator, { body: device }, WithId);
  await act(house, assignDevice, coordinator, { params: { deviceId: made.id }, body: { participantId: person.id } }, Anything);
  await giveSupplies(story, member, person);
  if (member.caregiver) await inviteHelper(story, member, member.caregiver, person);
}

async function inviteHelper(story: Story, member: CastMember, { name, email }: { name: string; email: string }, person: Enrolled): Promise<void> {
  const participant = await personOf(story.house, person.email);
  const shares = { adherence: true, diary: false, missedMail: true };
  const { id } = await act(story.house, inviteCaregiver, participant, { body: { name, email, shares } }, WithId);
  await accept(story.house, email, name);
  if (!member.assisted) return;
  await act(story.house, changeShares, participant, { params: { caregiverId: id }, body: { ...shares, diary: true } }, Anything);
  await act(story.house, setCaregiverCode, await personOf(story.house, email), { body: { code: helperCode } }, Anything);
}

const Draft = z.object({ id: z.string(), contentHash: z.string() });

export interface Wanted {
  intensityMilliamp: number;
  sessionsTotal: number;
  amendsId: string | null;
  reason: string | null;
}

/** Usual: 2 mA for 20 min between F3 and Fp2, pads of 35 cm² (common practice; Bikson et al. 2009 for the pads). */
export async function prescribe(story: Story, member: CastMember, person: Enrolled, wanted: Partial<Wanted> = {}): Promise<string> {
  const { house } = story;
  const clinician = await clinicianOf(story, member);
  const [anode, cathode] = member.montage ?? ['F3', 'Fp2'];
  const pad = (position: string, polarity: 'anode' | 'cathode') => ({ position, polarity, shape: 'pad' as const, areaSquareCentimetre: 35, share: 1 });
  const body = {
    participantId: person.id,
    amendsId: wanted.amendsId ?? null,
    reason: wanted.reason ?? null,
    dose: {
      waveform: 'tDCS',
      intensityMilliamp: wanted.intensityMilliamp ?? (member.fate === 'second_signature' ? 3 : 2),
      ...{ rampUpSeconds: 30, holdSeconds: 1200, rampDownSeconds: 30, electrodes: [pad(anode, 'anode'), pad(cathode, 'cathode')] },
    },
    schedule: {
      ...{ startsOn: await today(story), days: [1, 2, 3, 4, 5, 6, 7], hoursFrom: '00:00', hoursTo: '23:59' },
      sessionsTotal: wanted.sessionsTotal ?? (member.fate === 'finished' ? 15 : 30),
      // Daily at the same hour: the session of a week ago is still inside the seven days when the next one is due.
      ...{ minGapHours: 20, maxPerDay: 1, maxPer7Days: 8, expiresOn: await today(story, 90), makeUpMissed: false },
    },
    assisted: member.assisted ?? false,
  };
  const draft = await act(house, writePrescription, clinician, { body }, Draft);
  const sign = { contentHash: draft.contentHash, meaning: 'prescribed', password: demoPassword };
  await act(house, signPrescription, clinician, { params: { prescriptionId: draft.id }, body: sign }, Anything);
  if (member.fate !== 'second_signature') await acknowledge(story, person, draft.id);
  return draft.id;
}

export async function acknowledge(story: Story, person: Enrolled, prescriptionId: string): Promise<void> {
  await act(story.house, acknowledgePrescription, await personOf(story.house, person.email), { params: { prescriptionId }, body: {} }, Anything);
}
