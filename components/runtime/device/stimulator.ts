// What the app asks of any stimulator, in the words of the field. A real one and the simulated one stand behind this alike.
// It must not know screens, the server or accounts: the permit is all that it is given.

import type { SessionSnapshot } from '@/shared/rules/session';
import type { TrapezoidFacts } from '@/shared/rules/dose';
import type { Polarity } from '@/shared/values/codes';
import type { Sample } from '@/shared/rules/delivered';

export type ContactGrade = 'good' | 'weak' | 'none';
export interface ElectrodeContact {
  position: string;
  polarity: Polarity;
  /** null = open circuit */
  kiloohm: number | null;
  grade: ContactGrade;
}
export interface DeviceIdentity {
  deviceId: string;
  serial: string;
  firmware: string;
  batteryPercent: number;
}

/** A public key as the server gives it out (JWK, RFC 7517; RFC 8037 for Ed25519). */
export interface PermitKey {
  kty: 'OKP';
  crv: 'Ed25519';
  x: string;
  kid: string;
  alg: 'EdDSA';
  use: 'sig';
}
export interface Pairing {
  deviceId: string;
  serial: string;
  keys: readonly PermitKey[];
  /** Who wears it; a permit for anybody else is refused. Not told: not checked. */
  participantId?: string | undefined;
  /** The server's time: a stimulator has no clock of its own that lasts without its battery. */
  now: string;
}

/** Why a stimulator does not start. Each has its sentence in `device:refusal`. */
export const startRefusals = [
  'not_paired',
  'permit_unreadable',
  'permit_foreign',
  'permit_altered',
  'permit_other_device',
  'permit_other_person',
  'permit_expired',
  'permit_not_yet',
  'permit_old',
  'permit_older_version',
  'permit_above_ceiling',
  'permit_other_placement',
  'cannot_check',
  'contact_not_good',
  'session_running',
  'battery_empty',
  'faulty',
  'record_unwritable',
] as const;
export type StartRefusal = (typeof startRefusals)[number];
export type StartAnswer = { readonly started: true } | { readonly started: false; readonly why: StartRefusal };

export type StopWhy = 'button' | 'red_flag' | 'pain_high' | 'permit_void' | 'clock_implausible' | 'over_current';
export type EndedWhy =
  | 'complete'
  | 'stopped'
  | 'pause_limit'
  | 'lost_contact'
  | 'too_short_to_resume'
  | 'red_flag'
  | 'pain_high'
  | 'over_current'
  | 'permit_void'
  | 'device_fault';

/** One line of the stimulator's own record. Seconds since the start of the ramp up; `index` counts 0, 1, 2 … in a session. */
export type DeviceEntry = { readonly index: number; readonly atSeconds: number } & (
  | { readonly kind: 'started'; readonly counter: number }
  | {
      readonly kind: 'contact';
      readonly position: string;
      readonly kiloohm: number | null;
      readonly grade: ContactGrade;
    }
  | { readonly kind: 'contact_lost' | 'contact_back' | 'pause' | 'resume' }
  | { readonly kind: 'stop'; readonly why: StopWhy }
  | { readonly kind: 'ended'; readonly reason: EndedWhy; readonly onSeconds: number; readonly chargeCoulomb: number }
);

export interface DeviceRecord {
  readonly entries: readonly DeviceEntry[];
  /** One a second, numbered by their place: the first is number 0. */
  readonly samples: readonly Sample[];
}

/** The session that runs, or the last one until the next begins. */
export interface DeviceSession {
  readonly sessionId: string;
  readonly permitId: string;
  readonly dose: TrapezoidFacts;
  /** Since the start of the ramp up; stands still once the session has ended. */
  readonly seconds: number;
  readonly snapshot: SessionSnapshot;
  /** What moved it so far, for drawing its curve. */
  readonly events: readonly (readonly [number, DeviceWord])[];
  readonly stopWhy: StopWhy | null;
  readonly endedWhy: EndedWhy | null;
}
export type DeviceWord = 'contact_lost' | 'contact_back' | 'pause' | 'resume' | 'stop';

export interface DeviceStatus {
  readonly identity: DeviceIdentity | null;
  readonly contacts: readonly ElectrodeContact[];
  readonly session: DeviceSession | null;
  /** Of what was before, its record can say nothing. */
  readonly remembersSinceMs: number | null;
  /** False once its record could not be written: then it starts nothing. */
  readonly recordIsKept: boolean;
  readonly isFaulty: boolean;
}

export interface Stimulator {
  /** Takes up what it was doing, a running session too. Called once, before anything else. */
  open(): Promise<void>;
  pair(pairing: Pairing): Promise<DeviceIdentity>;
  /** Begins to measure the contact of these electrodes; readings come with `status`. */
  measureContact(electrodes: readonly { position: string; polarity: Polarity }[]): void;
  /** The wearer has wetted and pressed this pad: measure it anew. */
  attend(position: string): void;
  start(permitToken: string): Promise<StartAnswer>;
  pause(): void;
  /** False while contact does not allow it. */
  resume(): boolean;
  /** Acts at once, whatever else is on its way. */
  stop(why: StopWhy): void;
  status(): DeviceStatus;
  /** What is safely written of a session, from these places on. */
  record(sessionId: string, from: { entry: number; sample: number }): DeviceRecord;
  /** Told after every change and at least once a second while a session runs. Gives back how to leave. */
  subscribe(listener: () => void): () => void;
  close(): void;
}
