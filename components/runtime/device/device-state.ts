// What the simulated stimulator remembers, and how it keeps it: a database of its own, apart from the app's. The app reads it only
// through the stimulator.

import { openDB, type DBSchema, type IDBPDatabase } from 'idb';
import type { PermitClaims } from '@/shared/contracts/permit';
import type { Sample } from '@/shared/rules/delivered';
import type { TrapezoidFacts } from '@/shared/rules/dose';
import type { Polarity } from '@/shared/values/codes';
import { milliampOf, secondsOf } from '@/shared/values/units';
import type { PlacedPad } from './contact-model';
import type { StandAloneState } from './stand-alone';
import type { ContactGrade, DeviceEntry, DeviceWord, EndedWhy, PermitKey, StopWhy } from './stimulator';

export interface KeptSession {
  sessionId: string;
  permitId: string;
  dose: TrapezoidFacts;
  seed: number;
  startedAtUptime: number;
  /** Real time since the start; differs from the stimulator's own only where a demo runs faster. */
  realSeconds: number;
  events: [number, DeviceWord][];
  stopWhy: StopWhy | null;
  isContactLost: boolean;
  grades: Record<string, ContactGrade>;
  /** The last tenth of a second that was lived through; −1 before the first. */
  measuredTenth: number;
  lastSampleSeconds: number;
  entryCount: number;
  sampleCount: number;
  endedWhy: EndedWhy | null;
  endedAtSeconds: number | null;
}

export interface KeptState {
  pairing: { deviceId: string; serial: string; keys: PermitKey[]; participantId?: string | undefined } | null;
  /** The server's time less the phone's, when it was last told. */
  clockAheadMs: number;
  /** No time before this is believed. */
  notBeforeMs: number;
  highestCounter: number;
  /** The newest version of the course last started; absent or null = none yet. */
  newestVersion?: { course: string; version: number } | null;
  /** When its memory begins, by the time it was told at its first pairing; null = not known. */
  remembersSinceMs: number | null;
  uptimeSeconds: number;
  /** The phone's time when `uptimeSeconds` was true. */
  wallMs: number;
  pace: number;
  batteryPercent: number;
  chargedAtMs: number | null;
  isFaulty: boolean;
  /** Set up by staff to run without a radio; absent or null = it takes permits. */
  standAlone?: StandAloneState | null;
  electrodes: { position: string; polarity: Polarity }[];
  pads: PlacedPad[];
  session: KeptSession | null;
}

export function emptyState(wallMs: number): KeptState {
  return {
    pairing: null,
    clockAheadMs: 0,
    notBeforeMs: 0,
    highestCounter: 0,
    remembersSinceMs: null,
    uptimeSeconds: 0,
    wallMs,
    pace: 1,
    batteryPercent: 0,
    chargedAtMs: null,
    isFaulty: false,
    electrodes: [],
    pads: [],
    session: null,
  };
}

export type WhatBegins = Pick<KeptSession, 'sessionId' | 'permitId' | 'dose'>;

/** What begins by a permit, as its claims say. */
export function begunBy(claims: PermitClaims): WhatBegins {
  return {
    sessionId: claims.session,
    permitId: claims.jti,
    dose: {
      intensityMilliamp: milliampOf(claims.intensityMicroamp),
      rampUpSeconds: secondsOf(claims.rampUpMs),
      holdSeconds: secondsOf(claims.holdMs),
      rampDownSeconds: secondsOf(claims.rampDownMs),
    },
  };
}

/** A session that begins at this moment. */
export function freshSession(what: WhatBegins, seed: number, uptimeSeconds: number): KeptSession {
  return {
    ...what,
    seed,
    startedAtUptime: uptimeSeconds,
    realSeconds: 0,
    events: [],
    stopWhy: null,
    isContactLost: false,
    grades: {},
    measuredTenth: -1,
    lastSampleSeconds: -1,
    // The line that it was started is written with it.
    entryCount: 1,
    sampleCount: 0,
    endedWhy: null,
    endedAtSeconds: null,
  };
}

/** What was written in one go. */
interface Piece {
  entries: DeviceEntry[];
  samples: Sample[];
}
interface Schema extends DBSchema {
  state: { key: 'now'; value: KeptState };
  /** By session and the numbers of the first entry and sample: the same piece written twice is one. */
  piece: { key: [string, number, number]; value: Piece };
}

export interface DeviceStore {
  read(): Promise<{ state: KeptState | undefined; entries: DeviceEntry[]; samples: Sample[] }>;
  /** All of it or nothing. */
  write(state: KeptState, entries: readonly DeviceEntry[], samples: readonly Sample[]): Promise<void>;
  close(): void;
}

function rangeOf(sessionId: string): IDBKeyRange {
  return IDBKeyRange.bound([sessionId], [sessionId, []]);
}

async function writeAll(
  db: IDBPDatabase<Schema>,
  state: KeptState,
  entries: readonly DeviceEntry[],
  samples: readonly Sample[],
): Promise<void> {
  const writing = db.transaction(['state', 'piece'], 'readwrite');
  const puts: Promise<unknown>[] = [writing.objectStore('state').put(state, 'now')];
  const { session } = state;
  if (session !== null && (entries.length > 0 || samples.length > 0)) {
    const key: [string, number, number] = [
      session.sessionId,
      session.entryCount - entries.length,
      session.sampleCount - samples.length,
    ];
    puts.push(writing.objectStore('piece').put({ entries: [...entries], samples: [...samples] }, key));
  }
  // One failed put ends the transaction; both are awaited, so that neither rejection goes unheard.
  await Promise.all([...puts, writing.done]);
}

export async function openDeviceStore(accountId: string): Promise<DeviceStore> {
  const db = await openDB<Schema>(`rampwell-stimulator-${accountId}`, 1, {
    upgrade(fresh) {
      fresh.createObjectStore('state');
      fresh.createObjectStore('piece');
    },
  });
  return {
    async read() {
      const reading = db.transaction(['state', 'piece'], 'readonly');
      const state = await reading.objectStore('state').get('now');
      const sessionId = state?.session?.sessionId;
      if (sessionId === undefined) return { state, entries: [], samples: [] };
      const pieces = await reading.objectStore('piece').getAll(rangeOf(sessionId));
      return {
        state,
        entries: pieces.flatMap((piece) => piece.entries),
        samples: pieces.flatMap((piece) => piece.samples),
      };
    },
    write: (state, entries, samples) => writeAll(db, state, entries, samples),
    close: () => db.close(),
  };
}
