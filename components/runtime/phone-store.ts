// What this phone keeps for one account: the run, its events until the server has them, unsent diaries and photos, drafts. Nothing
// here decides; a row is forgotten only when the server has answered for it.

import { openDB, type DBSchema, type IDBPDatabase } from 'idb';
import type { SiteContact } from '@/shared/contracts/account';
import type { DoseView } from '@/shared/contracts/course';
import type { SessionEvent } from '@/shared/contracts/permit';
import type { BodyIn } from '@/shared/contracts/contract';
import type { writeDiary } from '@/shared/contracts/session';
import type { RedFlag } from '@/shared/values/codes';
import type { z } from 'zod';

export type Advice = RedFlag | 'pain_high';

/** One session on this phone, from the permit to the last of its record. */
export interface RunRow {
  permitId: string;
  sessionId: string;
  courseId: string;
  deviceId: string;
  sessionNumber: number;
  sessionsTotal: number;
  dose: DoseView;
  /** Whom to call, and the emergency number: kept here because advice must not need a network. */
  site: z.infer<typeof SiteContact>;
  phase: 'starting' | 'running' | 'ended';
  nextSequence: number;
  /** How much of the stimulator's own record is in the log already. */
  entriesTaken: number;
  samplesTaken: number;
  advice: Advice | null;
  /** Whole seconds by which a demo has moved the server's clock for this run. */
  demoSecondsTold: number;
}
export interface EventRow {
  id: string;
  permitId: string;
  sequence: number;
  event: SessionEvent;
}
export interface DiaryRow {
  /** Idempotency key: made once, whatever the number of tries. */
  key: string;
  sessionId: string;
  body: BodyIn<typeof writeDiary>;
}
export interface PhotoRow {
  key: string;
  sessionId: string;
  photo: Blob;
}
/** What the server refused: kept aside and named, never thrown away unseen. */
export interface AsideRow {
  id: string;
  kind: 'event' | 'diary' | 'photo';
  sessionId: string | null;
  code: string;
  content: unknown;
}

export interface PhoneSchema extends DBSchema {
  run: { key: string; value: RunRow };
  event: { key: string; value: EventRow; indexes: { bySequence: [string, number] } };
  diary: { key: string; value: DiaryRow };
  photo: { key: string; value: PhotoRow };
  aside: { key: string; value: AsideRow };
  draft: { key: string; value: unknown };
}
export type PhoneStore = IDBPDatabase<PhoneSchema>;

const opened = new Map<string, Promise<PhoneStore>>();

/** The store of an account; one connection a page. */
export function phoneStore(accountId: string): Promise<PhoneStore> {
  const known = opened.get(accountId);
  if (known) return known;
  const opening = openDB<PhoneSchema>(`rampwell-${accountId}`, 1, {
    upgrade(fresh) {
      fresh.createObjectStore('run', { keyPath: 'permitId' });
      fresh.createObjectStore('event', { keyPath: 'id' }).createIndex('bySequence', ['permitId', 'sequence']);
      fresh.createObjectStore('diary', { keyPath: 'key' });
      fresh.createObjectStore('photo', { keyPath: 'key' });
      fresh.createObjectStore('aside', { keyPath: 'id' });
      fresh.createObjectStore('draft');
    },
  });
  opened.set(accountId, opening);
  // A failed opening may be tried again: private windows can be closed, disks emptied.
  opening.catch(() => opened.delete(accountId));
  return opening;
}

/** Whether anything can be kept here: written, read back and removed. */
export async function canKeep(accountId: string): Promise<boolean> {
  try {
    const store = await phoneStore(accountId);
    await store.put('draft', 'kept', 'trial');
    const read = await store.get('draft', 'trial');
    await store.delete('draft', 'trial');
    return read === 'kept';
  } catch {
    return false;
  }
}

export async function readDraft<T>(accountId: string, name: string, shape: z.ZodType<T>): Promise<T | null> {
  try {
    const parsed = shape.safeParse(await (await phoneStore(accountId)).get('draft', name));
    return parsed.success ? parsed.data : null;
  } catch {
    // Without a draft one begins anew; nothing is lost that was sent.
    return null;
  }
}

export async function keepDraft(accountId: string, name: string, draft: unknown): Promise<void> {
  try {
    await (await phoneStore(accountId)).put('draft', draft, name);
  } catch {
    // The page still holds it.
  }
}

export async function forgetDraft(accountId: string, name: string): Promise<void> {
  try {
    await (await phoneStore(accountId)).delete('draft', name);
  } catch {
    // What cannot be opened holds no draft.
  }
}

/** The run that is not over, or the last one whose end the person has not left yet. */
export async function findRun(store: PhoneStore): Promise<RunRow | null> {
  const runs = await store.getAll('run');
  return runs.find((run) => run.phase === 'running') ?? runs.at(-1) ?? null;
}
