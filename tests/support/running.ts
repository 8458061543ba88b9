// What: the steps from a person who is ready to a session with its record, by the real actions: pre-check, permit, the stimulator's events.
// Must not: say what is right; tests do.
import { randomUUID } from 'node:crypto';
import type { AccountActor } from '@/server/action';
import { writeDiary } from '@/server/features/diary/write-diary';
import { issuePermit } from '@/server/features/permit/issue-permit';
import { answerPrecheck } from '@/server/features/precheck/answer-precheck';
import { sendEvents } from '@/server/features/session/send-events';
import type { PermitView, SessionEvent } from '@/shared/contracts/permit';
import type { PrecheckAnswers } from '@/shared/rules/precheck';
import { instantOf, localDate, addDays } from '@/shared/values/zone';
import { openClinic, type Clinic, type Patient } from './clinic';
import { inForce, type Change } from './prescribing';
import { makeReady } from './records';

export const zone = 'Europe/London';

/** Moves the clock to the next 10 o'clock in the morning, so that no test meets midnight on its way. */
export async function goToMorning(clinic: Clinic): Promise<void> {
  const now = Date.parse(await clinic.now());
  const today = localDate(now, zone);
  const ten = instantOf(today, '10:00', zone);
  const next = ten > now ? ten : instantOf(addDays(today, 1), '10:00', zone);
  await clinic.advance(Math.ceil((next - now) / 1000));
}

/** A clinic of its own in the morning, with its clinician: how most tests of a session begin. */
export async function openMorning(): Promise<{ clinic: Clinic; siteId: string; oona: AccountActor }> {
  const clinic = await openClinic();
  await goToMorning(clinic);
  const siteId = await clinic.site('LS');
  return { clinic, siteId, oona: await clinic.staff('Oona Feld', 'clinician', siteId) };
}

export interface ReadyPatient {
  patient: Patient;
  deviceId: string;
  courseId: string;
}

/** Everything stands: only the pre-check is to come. */
export async function readyPatient(
  clinic: Clinic,
  clinician: AccountActor,
  siteId: string,
  change: Change = {},
): Promise<ReadyPatient> {
  const patient = await clinic.patient('Ines Marlow', siteId);
  const device = await makeReady(clinic, clinician, patient, siteId);
  const version = await inForce(clinic, clinician, patient, change);
  return { patient, deviceId: device.id, courseId: version.courseId };
}

export const clearAnswers: PrecheckAnswers = {
  ...{ seizure: 'no', faint: 'no', headInjury: 'no', implantOrMetal: false, skin: 'ok', mood: [], headache: 0 },
  ...{ sleptHours: 7, drinksLast12h: 0, drinks12To24h: 0, feelsAlcohol: false, drugs24h: false, newMedicine: 'none' },
  ...{ unwell: false, ready: true },
};

export function answer(clinic: Clinic, patient: Patient, change: PrecheckAnswers = {}, helperCode?: string) {
  return clinic.call(patient, answerPrecheck, { body: { answers: { ...clearAnswers, ...change }, helperCode } });
}

export function permitBody({ courseId, deviceId }: ReadyPatient, precheckId: string) {
  return { courseId, deviceId, precheckId, batteryPercent: 80 };
}

/** A clear pre-check and the permit for it. */
export async function permitFor(clinic: Clinic, ready: ReadyPatient): Promise<PermitView> {
  const { id } = await answer(clinic, ready.patient);
  return clinic.call(ready.patient, issuePermit, { body: permitBody(ready, id), key: randomUUID() });
}

type Bare<E> = E extends SessionEvent ? Omit<E, 'id' | 'sequence'> : never;
export type Said = Bare<SessionEvent>;

export function numbered(said: readonly Said[], from = 0): SessionEvent[] {
  return said.map((event, index) => ({ ...event, id: randomUUID(), sequence: from + index }) as SessionEvent);
}

/** Current of the trapezoid at a second: 30 s up, 1200 s hold, 30 s down. */
function currentAt(milliamp: number, second: number): number {
  const part = Math.min(1, second / 30, (1260 - second) / 30);
  return Math.round(Math.max(0, part) * milliamp * 1000) / 1000;
}

export function samplesOf(milliamp: number, from: number, to: number): [number, number][] {
  return Array.from({ length: to - from + 1 }, (_, index) => [from + index, currentAt(milliamp, from + index)]);
}

/** Events of a run that goes as planned up to a second, samples in batches of a minute. */
export function runUpTo(permit: PermitView, endSecond: number): Said[] {
  const milliamp = permit.dose.intensityMilliamp;
  const said: Said[] = [
    { kind: 'contact', atSeconds: 0, position: 'F3', kiloohm: 6.2, grade: 'good' },
    { kind: 'contact', atSeconds: 0, position: 'Fp2', kiloohm: 7.1, grade: 'good' },
    { kind: 'started', atSeconds: 0, counter: permit.counter },
  ];
  for (let from = 0; from < endSecond; from += 60) {
    const samples = samplesOf(milliamp, from, Math.min(endSecond, from + 59));
    said.push({
      kind: 'samples',
      atSeconds: from,
      samples,
      impedance: [
        ['F3', 6.4],
        ['Fp2', 7.5],
      ],
    });
  }
  return said;
}

type EndReason = Extract<SessionEvent, { kind: 'ended' }>['reason'];

/** A whole record: the run and its end. */
export function wholeRun(
  permit: PermitView,
  endSecond = 1260,
  reason: EndReason = 'complete',
  more: readonly Said[] = [],
): SessionEvent[] {
  const said = [...runUpTo(permit, endSecond), ...more];
  const end = {
    kind: 'ended',
    atSeconds: endSecond,
    reason,
    onSeconds: endSecond,
    chargeCoulomb: 99,
    lastSequence: said.length,
  } as const;
  return numbered([...said, end]);
}

export function send(clinic: Clinic, patient: Patient, permit: PermitView, events: readonly SessionEvent[]) {
  return clinic.call(patient, sendEvents, { params: { permitId: permit.id }, body: { events: [...events] } });
}

/** A session from pre-check to its whole record. */
export async function runSession(
  clinic: Clinic,
  ready: ReadyPatient,
  run: { endSecond?: number; reason?: EndReason; more?: readonly Said[] } = {},
): Promise<PermitView> {
  const permit = await permitFor(clinic, ready);
  await clinic.advance(1300);
  await send(clinic, ready.patient, permit, wholeRun(permit, run.endSecond, run.reason, run.more));
  return permit;
}

/** A diary that tells of nothing. */
export function quietDiary(clinic: Clinic, patient: Patient, { sessionId }: PermitView) {
  const answers = { nothingFelt: true, effects: [], headacheAfter: 0, skin: 'ok' as const, redFlags: [] };
  return clinic.call(patient, writeDiary, { params: { sessionId }, body: { kind: 'after', answers } });
}
