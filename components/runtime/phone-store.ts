// What this phone keeps for one account: the run, its events until the server has them, unsent diaries and photos, drafts, all of it
// sealed. Nothing here decides; a row is forgotten only when the server has answered for it.

import { openDB, type DBSchema, type IDBPDatabase } from 'idb';
import type { SiteContact } from '@/shared/contracts/account';
import type { DoseView } from '@/shared/contracts/course';
import type { SessionEvent } from '@/shared/contracts/permit';
import type { BodyIn } from '@/shared/contracts/contract';
import type { writeDiary } from '@/shared/contracts/session';
import type { RedFlag } from '@/shared/values/codes';
import type { z } from 'zod';
import { openVault, type Sealed, type Vault } from './vault';

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

/** Kept beside what is sealed: only ids and numbers that order rows. */
interface Kept<Content> {
  sealed: Sealed<Content>;
}
interface PhoneSchema extends DBSchema {
  run: { key: string; value: Kept<RunRow> & { permitId: string; revision: number } };
  event: {
    key: string;
    value: Kept<SessionEvent> & { id: string; permitId: string; sequence: number };
    indexes: { bySequence: [string, number] };
  };
  diary: { key: string; value: Kept<DiaryRow> & { key: string } };
  photo: {
    key: string;
    value: Kept<ArrayBuffer> & { key: string; type: string; about: Sealed<Pick<PhotoRow, 'sessionId'>> };
  };
  refusedPhoto: {
    key: string;
    value: Kept<ArrayBuffer> & { key: string; type: string; about: Sealed<Pick<PhotoRow, 'sessionId'>> };
  };
  aside: { key: string; value: Kept<AsideRow> & { id: string } };
  draft: { key: string; value: Sealed<unknown> };
}

/** How often a change of a run is tried when another page changed it in between. One page drives, so once is the rule. */
const mostTries = 20;

/** What one account keeps on this phone, sealed row by row. */
export class PhoneStore {
  constructor(
    private readonly base: IDBPDatabase<PhoneSchema>,
    private readonly vault: Vault,
  ) {}

  private async opened<T>(row: Kept<T> | undefined): Promise<T | undefined> {
    return row === undefined ? undefined : this.vault.open(row.sealed);
  }

  private allOpened<T>(rows: readonly Kept<T>[]): Promise<T[]> {
    return Promise.all(rows.map(({ sealed }) => this.vault.open(sealed)));
  }

  // ── runs and their events ──

  async runs(): Promise<RunRow[]> {
    return this.allOpened(await this.base.getAll('run'));
  }

  async run(permitId: string): Promise<RunRow | undefined> {
    return this.opened(await this.base.get('run', permitId));
  }

  async addRun(run: RunRow): Promise<void> {
    await this.base.put('run', { permitId: run.permitId, revision: 0, sealed: await this.vault.seal(run) });
  }

  async forgetRun(permitId: string): Promise<void> {
    await this.base.delete('run', permitId);
  }

  async forgetOtherRuns(permitId: string): Promise<void> {
    for (const key of await this.base.getAllKeys('run')) if (key !== permitId) await this.base.delete('run', key);
  }

  /**
   * Changes a run and adds events in one piece. Sealing cannot happen inside a transaction of the browser's, so the run is read, the
   * rows are sealed, and all is written if the run is still the one that was read; else again.
   */
  async changeRun(
    permitId: string,
    change: (run: RunRow) => { run: RunRow; events: readonly SessionEvent[] },
  ): Promise<RunRow | null> {
    for (let tries = 0; tries < mostTries; tries += 1) {
      const row = await this.base.get('run', permitId);
      const run = await this.opened(row);
      if (row === undefined || run === undefined) return null;
      const next = change(run);
      const [sealed, ...events] = await Promise.all([
        this.vault.seal(next.run),
        ...next.events.map((event) => this.vault.seal(event)),
      ]);
      const writing = this.base.transaction(['run', 'event'], 'readwrite');
      const still = await writing.objectStore('run').get(permitId);
      if (still?.revision !== row.revision) {
        await writing.done;
        continue;
      }
      await Promise.all([
        ...events.map((content, place) => {
          const { id, sequence } = next.events[place] ?? { id: '', sequence: 0 };
          return writing.objectStore('event').put({ id, permitId, sequence, sealed: content });
        }),
        writing.objectStore('run').put({ permitId, revision: row.revision + 1, sealed }),
        writing.done,
      ]);
      return next.run;
    }
    throw new Error('the run was changed by others each time');
  }

  /** The first events of one permit that wait, in their order. */
  async firstEvents(limit: number): Promise<EventRow[]> {
    const [first] = await this.base.getAllFromIndex('event', 'bySequence', undefined, 1);
    if (!first) return [];
    const range = IDBKeyRange.bound([first.permitId, 0], [first.permitId, Number.MAX_SAFE_INTEGER]);
    const rows = await this.base.getAllFromIndex('event', 'bySequence', range, limit);
    const events = await this.allOpened(rows);
    return rows.flatMap(({ id, permitId, sequence }, place) => {
      const event = events[place];
      return event ? [{ id, permitId, sequence, event }] : [];
    });
  }

  /** Forgets events that the server has answered for, and keeps aside what it refused, in one piece. */
  async settleEvents(forgotten: readonly string[], asides: readonly AsideRow[]): Promise<void> {
    const sealed = await Promise.all(asides.map((row) => this.vault.seal(row)));
    const writing = this.base.transaction(['event', 'aside'], 'readwrite');
    await Promise.all([
      ...forgotten.map((id) => writing.objectStore('event').delete(id)),
      ...sealed.map((content, place) =>
        writing.objectStore('aside').put({ id: asides[place]?.id ?? '', sealed: content }),
      ),
      writing.done,
    ]);
  }

  // ── diaries and photos ──

  async keepDiary(row: DiaryRow): Promise<void> {
    await this.base.put('diary', { key: row.key, sealed: await this.vault.seal(row) });
  }

  async diaries(): Promise<DiaryRow[]> {
    return this.allOpened(await this.base.getAll('diary'));
  }

  async keepPhoto({ key, sessionId, photo }: PhotoRow): Promise<void> {
    const [sealed, about] = await Promise.all([
      this.vault.sealBytes(await photo.arrayBuffer()),
      this.vault.seal({ sessionId }),
    ]);
    await this.base.put('photo', { key, type: photo.type, about, sealed });
  }

  async photos(): Promise<PhotoRow[]> {
    const rows = await this.base.getAll('photo');
    return Promise.all(
      rows.map(async ({ key, type, about, sealed }) => ({
        key,
        ...(await this.vault.open(about)),
        photo: new Blob([await this.vault.openBytes(sealed)], { type }),
      })),
    );
  }

  async holds(kind: 'diary' | 'photo', key: string): Promise<boolean> {
    return (await this.base.count(kind, key)) > 0;
  }

  async forget(kind: 'diary' | 'photo', key: string): Promise<void> {
    await this.base.delete(kind, key);
  }

  // ── what was refused ──

  async keepAside(row: AsideRow): Promise<void> {
    await this.base.put('aside', { id: row.id, sealed: await this.vault.seal(row) });
  }

  /** A photo that the server refused stays on the phone as it is, named among what was put aside. */
  async keepPhotoAside(row: Omit<AsideRow, 'content' | 'kind'>): Promise<void> {
    const aside: AsideRow = { ...row, kind: 'photo', content: null };
    const sealed = await this.vault.seal(aside);
    const writing = this.base.transaction(['photo', 'refusedPhoto', 'aside'], 'readwrite');
    const photo = await writing.objectStore('photo').get(row.id);
    if (photo) await writing.objectStore('refusedPhoto').put(photo);
    await Promise.all([
      writing.objectStore('aside').put({ id: row.id, sealed }),
      writing.objectStore('photo').delete(row.id),
      writing.done,
    ]);
  }

  async aside(id: string): Promise<AsideRow | undefined> {
    return this.opened(await this.base.get('aside', id));
  }

  async asides(): Promise<AsideRow[]> {
    return this.allOpened(await this.base.getAll('aside'));
  }

  count(kind: 'event' | 'diary' | 'photo' | 'aside'): Promise<number> {
    return this.base.count(kind);
  }

  // ── drafts ──

  async draft(name: string): Promise<unknown> {
    const sealed = await this.base.get('draft', name);
    return sealed === undefined ? undefined : this.vault.open(sealed);
  }

  async keepDraft(name: string, draft: unknown): Promise<void> {
    await this.base.put('draft', await this.vault.seal(draft), name);
  }

  async forgetDraft(name: string): Promise<void> {
    await this.base.delete('draft', name);
  }
}

async function openStore(accountId: string): Promise<PhoneStore> {
  const base = await openDB<PhoneSchema>(`rampwell-phone-${accountId}`, 1, {
    upgrade(fresh) {
      fresh.createObjectStore('run', { keyPath: 'permitId' });
      fresh.createObjectStore('event', { keyPath: 'id' }).createIndex('bySequence', ['permitId', 'sequence']);
      fresh.createObjectStore('diary', { keyPath: 'key' });
      fresh.createObjectStore('photo', { keyPath: 'key' });
      fresh.createObjectStore('refusedPhoto', { keyPath: 'key' });
      fresh.createObjectStore('aside', { keyPath: 'id' });
      fresh.createObjectStore('draft');
    },
  });
  return new PhoneStore(base, await openVault(`rampwell.${accountId}`));
}

const opened = new Map<string, Promise<PhoneStore>>();

/** The store of an account; one connection a page. */
export function phoneStore(accountId: string): Promise<PhoneStore> {
  const known = opened.get(accountId);
  if (known) return known;
  const opening = openStore(accountId);
  opened.set(accountId, opening);
  // A failed opening may be tried again: private windows can be closed, disks emptied.
  opening.catch(() => opened.delete(accountId));
  return opening;
}

/** Whether anything can be kept here: written, read back and removed. */
export async function canKeep(accountId: string): Promise<boolean> {
  try {
    const store = await phoneStore(accountId);
    await store.keepDraft('trial', 'kept');
    const read = await store.draft('trial');
    await store.forgetDraft('trial');
    return read === 'kept';
  } catch {
    return false;
  }
}

export async function readDraft<T>(accountId: string, name: string, shape: z.ZodType<T>): Promise<T | null> {
  try {
    const parsed = shape.safeParse(await (await phoneStore(accountId)).draft(name));
    return parsed.success ? parsed.data : null;
  } catch {
    // Without a draft one begins anew; nothing is lost that was sent.
    return null;
  }
}

export async function keepDraft(accountId: string, name: string, draft: unknown): Promise<void> {
  try {
    await (await phoneStore(accountId)).keepDraft(name, draft);
  } catch {
    // The page still holds it.
  }
}

export async function forgetDraft(accountId: string, name: string): Promise<void> {
  try {
    await (await phoneStore(accountId)).forgetDraft(name);
  } catch {
    // What cannot be opened holds no draft.
  }
}

/** The run that is not over, or the last one whose end the person has not left yet. */
export async function findRun(store: PhoneStore): Promise<RunRow | null> {
  const runs = await store.runs();
  return runs.find((run) => run.phase === 'running') ?? runs.at(-1) ?? null;
}
