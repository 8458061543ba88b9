// What: everything that a record can hold, made by the real actions: forms, prescription and amendments, a finished session with diary
// and photo, an unfinished one, messages, a review. Words in it are found nowhere else, so a test can tell where they leak.
// Must not: say what is right; tests do.
import { randomUUID } from 'node:crypto';
import sharp from 'sharp';
import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { setCaregiverCode } from '@/server/features/caregiver/set-caregiver-code';
import { recordConsent } from '@/server/features/consent/record-consent';
import { pauseCourse } from '@/server/features/course/pause-course';
import { writeDiary } from '@/server/features/diary/write-diary';
import { sendMessage } from '@/server/features/message/send-message';
import { issuePermit } from '@/server/features/permit/issue-permit';
import { addPhoto } from '@/server/features/photo/add-photo';
import { acknowledgePrescription } from '@/server/features/prescription/acknowledge-prescription';
import { writePrescription } from '@/server/features/prescription/write-prescription';
import { recordReview } from '@/server/features/review/record-review';
import { recordScreening } from '@/server/features/screening/record-screening';
import { giveSupply } from '@/server/features/supply/give-supply';
import { recordTraining } from '@/server/features/training/record-training';
import { recordWatchedSession } from '@/server/features/training/record-watched-session';
import type { PermitView, SessionEvent } from '@/shared/contracts/permit';
import type { PrescriptionView } from '@/shared/contracts/prescription';
import { localDate } from '@/shared/values/zone';
import type { Caregiver } from './caregivers';
import type { Clinic, Patient } from './clinic';
import { acknowledge, prescriptionFor, sign } from './prescribing';
import { consentForm, makeReady, screeningForm, trainingForm } from './records';
import { answer, permitBody, send, wholeRun, zone } from './running';

/** What people wrote in their own words. */
export const words = {
  diary: 'the kettle whistled twice',
  message: 'my cat sat on the stimulator',
  reply: 'cats are no electrodes',
  helper: 'Hepzibah Torrance',
  remark: 'the aunt comes along on Tuesdays',
  screening: 'migraine since the wedding in Ghent',
  amending: 'dizzy after the choir',
  finding: 'sounded tired on the telephone',
  lifting: 'slept well since',
  pausing: 'away at the lake',
} as const;

const helperCode = '246810';

export interface PersonsRecord {
  siteId: string;
  patient: Patient;
  caregiverId: string;
  deviceId: string;
  courseId: string;
  /** A first session that is over, with its diary and a photo. */
  permit: PermitView;
  photoId: string;
  /** A second one without a diary, of whose record one event has not come in. */
  second: PermitView;
  lastEvent: SessionEvent;
  /** In force since yesterday, and not acknowledged yet. */
  prescription: PrescriptionView;
  /** The row that the person's message opened on the worklist. */
  itemId: string;
}

interface Whose {
  siteId: string;
  clinician: AccountActor;
  patient: Patient;
  caregiver: Caregiver;
}

export async function smallPicture(): Promise<Buffer> {
  const create = { width: 8, height: 8, channels: 3, background: { r: 180, g: 60, b: 50 } } as const;
  return sharp({ create }).jpeg().toBuffer();
}

export async function keepRecord(clinic: Clinic, whose: Whose): Promise<PersonsRecord> {
  const { siteId, clinician, patient, caregiver } = whose;
  const device = await makeReady(clinic, clinician, patient, siteId);
  await writeForms(clinic, whose);
  await clinic.call(caregiver, setCaregiverCode, { body: { code: helperCode } });
  const prescribed = await amend(clinic, whose, null);
  await acknowledge(clinic, patient, prescribed);
  const ready = { patient, deviceId: device.id, courseId: prescribed.courseId };

  const permit = await startWithHelper(clinic, ready);
  await clinic.advance(1300);
  const felt = { kind: 'sensation', atSeconds: 300, sensation: 'tingling', strength: 3 } as const;
  await send(clinic, patient, permit, wholeRun(permit, 1260, 'complete', [felt]));
  await keepDiary(clinic, patient, permit.sessionId);
  const photoId = await photograph(clinic, patient, permit.sessionId);
  const itemId = await talk(clinic, whose);
  await pauseForAWhile(clinic, clinician, prescribed.courseId);

  await clinic.advance(86_400 - 1300);
  await acknowledge(clinic, patient, await amend(clinic, whose, prescribed.id));
  const second = await startWithHelper(clinic, ready);
  await clinic.advance(1300);
  const events = wholeRun(second);
  const lastEvent = events.find(({ kind }) => kind === 'samples');
  if (!lastEvent) throw new Error('a run has samples');
  await send(
    clinic,
    patient,
    second,
    events.filter((event) => event !== lastEvent),
  );
  const [inForce] = await clinic.rows(
    { id: z.string() },
    'select id from prescription where participant_id = $1 and signed_at is not null and closed_at is null',
    [patient.participantId],
  );
  const prescription = await amend(clinic, whose, inForce?.id ?? null);

  await clinic.advance(86_400 - 1300);
  const ids = { siteId, caregiverId: caregiver.caregiverId, deviceId: device.id, courseId: ready.courseId };
  return { ...ids, patient, permit, photoId, second, lastEvent, prescription, itemId };
}

/** What stands between the person and the next permit is done; answers with a body that gets one. */
export async function clearTheWay(clinic: Clinic, record: PersonsRecord) {
  const { patient, second, lastEvent, prescription } = record;
  await send(clinic, patient, second, [lastEvent]);
  await clinic.call(patient, acknowledgePrescription, { params: { prescriptionId: prescription.id }, body: {} });
  const [diary] = await clinic.rows({ id: z.string() }, 'select id from diary where session_id = $1', [
    second.sessionId,
  ]);
  if (!diary) await keepDiary(clinic, patient, second.sessionId);
  const { id } = await answer(clinic, patient, {}, helperCode);
  return permitBody(record, id);
}

async function startWithHelper(clinic: Clinic, ready: { patient: Patient; deviceId: string; courseId: string }) {
  const { id } = await answer(clinic, ready.patient, {}, helperCode);
  return clinic.call(ready.patient, issuePermit, { body: permitBody(ready, id), key: randomUUID() });
}

async function writeForms(clinic: Clinic, { clinician, patient }: Whose): Promise<void> {
  const params = { participantId: patient.participantId };
  const { remark } = words;
  await clinic.call(clinician, recordConsent, { params, body: { ...consentForm, remark } });
  const answers = screeningForm({ migraine_or_daily_headache: { answer: 'yes', reason: words.screening } });
  await clinic.call(clinician, recordScreening, { params, body: answers });
  await clinic.call(clinician, recordTraining, { params, body: { ...trainingForm, helperName: words.helper, remark } });
  const watched = { where: 'clinic', when: 'done', tolerated: 'well', remark } as const;
  await clinic.call(clinician, recordWatchedSession, { params, body: watched });
  const openedOn = localDate(Date.parse(await clinic.now()), zone);
  await clinic.call(clinician, giveSupply, { params, body: { kind: 'sponge', lot: 'L-1', openedOn } });
}

async function amend(clinic: Clinic, { clinician, patient }: Whose, amendsId: string | null) {
  const change = amendsId === null ? {} : { amendsId, reason: words.amending };
  const body = { ...prescriptionFor(patient, await clinic.now(), change), assisted: true };
  return sign(clinic, clinician, await clinic.call(clinician, writePrescription, { body }));
}

async function keepDiary(clinic: Clinic, patient: Patient, sessionId: string): Promise<void> {
  const felt = { kind: 'tingling', strength: 3, stillThere: false } as const;
  const answers = { nothingFelt: false, effects: [felt], headacheAfter: 0, skin: 'ok' as const, redFlags: [] };
  const body = { kind: 'after' as const, answers: { ...answers, freeText: words.diary } };
  await clinic.call(patient, writeDiary, { params: { sessionId }, body });
}

async function photograph(clinic: Clinic, patient: Patient, sessionId: string): Promise<string> {
  const { answer: photo, refusal } = await clinic.transact.run(addPhoto, {
    ...{ actor: patient, params: { sessionId }, query: undefined, body: { consent: 'true' }, key: null },
    ...{ file: { bytes: await smallPicture(), claimedType: 'image/jpeg' }, requestId: randomUUID() },
  });
  if (refusal) throw new Error(refusal.code);
  return addPhoto.contract.answer.parse(photo).id;
}

/** Two messages, an answer, a review of the first; answers with the row that the second one opened. */
async function talk(clinic: Clinic, { clinician, patient }: Whose): Promise<string> {
  const openItem = async () => {
    const [item] = await clinic.rows(
      { id: z.string() },
      `select id from worklist_item where participant_id = $1 and matter = 'message' and closed_at is null`,
      [patient.participantId],
    );
    return item?.id ?? '';
  };
  await clinic.call(patient, sendMessage, { body: { text: words.message } });
  const reply = { participantId: patient.participantId, text: words.reply };
  await clinic.call(clinician, sendMessage, { body: reply });
  const looked = { itemId: await openItem(), finding: words.finding, decision: 'done', reason: words.lifting } as const;
  await clinic.call(clinician, recordReview, { body: { ...looked, password: 'checked by the door' } });
  await clinic.call(patient, sendMessage, { body: { text: words.message } });
  return openItem();
}

async function pauseForAWhile(clinic: Clinic, clinician: AccountActor, courseId: string): Promise<void> {
  for (const paused of [true, false])
    await clinic.call(clinician, pauseCourse, { params: { courseId }, body: { paused, reason: words.pausing } });
}
