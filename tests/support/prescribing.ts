// What: bodies of prescriptions, and the steps that make one count, for tests that need a course.
// Must not: say what is right; tests do.
import type { AccountActor } from '@/server/action';
import { acknowledgePrescription } from '@/server/features/prescription/acknowledge-prescription';
import { signPrescription } from '@/server/features/prescription/sign-prescription';
import { writePrescription } from '@/server/features/prescription/write-prescription';
import type { BodyIn } from '@/shared/contracts/contract';
import type { PrescriptionView, writePrescription as writing } from '@/shared/contracts/prescription';
import { addDays, localDate } from '@/shared/values/zone';
import type { Clinic, Patient } from './clinic';

export type PrescriptionBody = BodyIn<typeof writing>;
export type Change = {
  dose?: Partial<PrescriptionBody['dose']>;
  schedule?: Partial<PrescriptionBody['schedule']>;
  amendsId?: string;
  reason?: string;
};

/** 2 mA for 20 min on every day from today, from midnight to a minute before the next, 20 sessions: one signature is enough. */
export function prescriptionFor(
  patient: Pick<Patient, 'participantId'>,
  now: string,
  change: Change = {},
): PrescriptionBody {
  const today = localDate(Date.parse(now), 'Europe/London');
  const pad = { shape: 'pad', areaSquareCentimetre: 35, share: 1 } as const;
  return {
    participantId: patient.participantId,
    amendsId: change.amendsId ?? null,
    reason: change.reason ?? null,
    assisted: false,
    dose: {
      ...{ waveform: 'tDCS', intensityMilliamp: 2, rampUpSeconds: 30, holdSeconds: 1200, rampDownSeconds: 30 },
      electrodes: [
        { position: 'F3', polarity: 'anode', ...pad },
        { position: 'Fp2', polarity: 'cathode', ...pad },
      ],
      ...change.dose,
    },
    schedule: {
      ...{ startsOn: today, days: [1, 2, 3, 4, 5, 6, 7], hoursFrom: '00:00', hoursTo: '23:59', sessionsTotal: 20 },
      ...{ minGapHours: 20, maxPerDay: 1, maxPer7Days: 7, expiresOn: addDays(today, 60), makeUpMissed: true },
      ...change.schedule,
    },
  };
}

export async function write(
  clinic: Clinic,
  who: AccountActor,
  patient: Patient,
  change: Change = {},
): Promise<PrescriptionView> {
  return clinic.call(who, writePrescription, { body: prescriptionFor(patient, await clinic.now(), change) });
}

export function sign(
  clinic: Clinic,
  who: AccountActor,
  draft: PrescriptionView,
  meaning: 'prescribed' | 'second_signature' = 'prescribed',
) {
  return clinic.call(who, signPrescription, signatureOn(draft, meaning));
}

export function signatureOn(
  draft: Pick<PrescriptionView, 'id' | 'contentHash'>,
  meaning: 'prescribed' | 'second_signature' = 'prescribed',
) {
  return {
    params: { prescriptionId: draft.id },
    body: { contentHash: draft.contentHash, meaning, password: 'checked by the door' },
  };
}

export function acknowledge(clinic: Clinic, patient: Patient, version: Pick<PrescriptionView, 'id'>) {
  return clinic.call(patient, acknowledgePrescription, { params: { prescriptionId: version.id }, body: {} });
}

/** Written, signed by one, acknowledged. */
export async function inForce(
  clinic: Clinic,
  clinician: AccountActor,
  patient: Patient,
  change: Change = {},
): Promise<PrescriptionView> {
  const version = await sign(clinic, clinician, await write(clinic, clinician, patient, change));
  await acknowledge(clinic, patient, version);
  return version;
}
