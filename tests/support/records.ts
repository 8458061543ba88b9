// What: forms as staff fill them in, and a diary, for tests that need a person who is ready, or who felt something.
// Must not: say what is right; tests do.
import { randomUUID } from 'node:crypto';
import type { AccountActor } from '@/server/action';
import { insertDiary } from '@/db/queries/diary';
import { recordConsent } from '@/server/features/consent/record-consent';
import { addDevice } from '@/server/features/device/add-device';
import { assignDevice } from '@/server/features/device/assign-device';
import { recordScreening } from '@/server/features/screening/record-screening';
import { recordTraining } from '@/server/features/training/record-training';
import { recordWatchedSession } from '@/server/features/training/record-watched-session';
import { capabilityItems, screeningItems, trainingSkills } from '@/shared/rules/screening';
import type { Clinic, Patient } from './clinic';

export const consentForm = {
  documentVersion: 1,
  signedOn: '2026-01-02',
  understandsPurpose: true,
  understandsRisks: true,
  understandsMayStop: true,
  agreesToDataUse: true,
  agreesToPhotos: true,
  questionsAnswered: true,
  copyGiven: true,
};

type Answer = { answer: 'yes' | 'no' | 'not_known'; reason?: string };

/** No to everything, but for what is given. */
export function screeningForm(change: Record<string, Answer> = {}) {
  const no = Object.fromEntries(screeningItems.map(({ id }): [string, Answer] => [id, { answer: 'no' }]));
  return { answers: { ...no, ...change }, seizureHistory: false };
}

const allTrue = (ids: readonly string[]) => Object.fromEntries(ids.map((id) => [id, true]));

export const trainingForm = { skills: allTrue(trainingSkills), capability: allTrue(capabilityItems) };

export async function newDevice(clinic: Clinic, who: AccountActor, siteId: string, label = 'D') {
  const serial = randomUUID();
  const body = { siteId, label, model: 'Model One', serial, firmware: '1.0', calibrationDueOn: '2030-01-01' };
  return clinic.call(who, addDevice, { body });
}

/** Consent, screening, training, a watched session and a device: all but the prescription. */
export async function makeReady(clinic: Clinic, who: AccountActor, patient: Patient, siteId: string) {
  const params = { participantId: patient.participantId };
  await clinic.call(who, recordConsent, { params, body: consentForm });
  await clinic.call(who, recordScreening, { params, body: screeningForm() });
  await clinic.call(who, recordTraining, { params, body: trainingForm });
  const body = { where: 'clinic' as const, when: 'done' as const, tolerated: 'well' as const };
  await clinic.call(who, recordWatchedSession, { params, body });
  const device = await newDevice(clinic, who, siteId);
  await clinic.call(who, assignDevice, { params: { deviceId: device.id }, body: params });
  return device;
}

export interface Felt {
  effects?: { kind: string; strength: number; stillThere: boolean }[];
  headacheAfter?: number;
  skin?: string;
  freeText?: string;
}

/** A diary straight into the database; how one comes about is tested where it is written. */
export async function keepDiary(clinic: Clinic, patient: Patient, sessionId: string, felt: Felt = {}) {
  const { effects = [], headacheAfter = 0, skin = 'ok', freeText } = felt;
  const answers = { nothingFelt: effects.length === 0, effects, headacheAfter, skin, redFlags: [], freeText };
  await insertDiary(clinic.client.db, {
    ...{ id: randomUUID(), sessionId, participantId: patient.participantId, kind: 'after', answers },
    ...{ headache: headacheAfter, worstStrength: Math.max(0, ...effects.map(({ strength }) => strength)) },
    ...{ worstGrade: 'mild', emergencyAdvice: false, writtenAt: await clinic.now(), accountId: patient.accountId },
  });
}
