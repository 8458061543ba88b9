// Sends what is kept on the phone until the server has answered for it: events in batches, then diaries, then photos. Tries again
// by itself, later and later, and at once when the network is back. It forgets only what was answered `stored` or `known`.

import { sendEvents } from '@/shared/contracts/permit';
import { addPhoto, writeDiary } from '@/shared/contracts/session';
import type { AnswerOf } from '@/shared/contracts/contract';
import type { Problem } from '@/shared/contracts/problem';
import { ApiProblem, callDoor } from './api';
import { phoneStore, type AsideRow, type EventRow, type PhoneStore } from './phone-store';

export interface Unsent {
  /** All that waits here. */
  count: number;
  events: number;
  diaries: number;
  photos: number;
  /** What the server refused and this phone keeps aside. */
  refused: number;
  /** The last try got no answer. */
  isOffline: boolean;
}
export const nothingUnsent: Unsent = { count: 0, events: 0, diaries: 0, photos: 0, refused: 0, isOffline: false };

type EventsAnswer = AnswerOf<typeof sendEvents>;

/** Own choices: small enough for a slow line, few enough calls for a long gap. */
const batchEvents = 60;
const firstWaitMs = 1000;
const longestWaitMs = 30_000;

const tooEarly = 'from_the_future';
/** The same of a whole batch, told by field. */
const allTooEarly = `event_${tooEarly}`;

/** Nobody can say yet what the server did, or it asks to come back: the same again, later. */
function isForLater(problem: unknown): boolean {
  if (!(problem instanceof ApiProblem)) return false;
  const { status } = problem.problem;
  // A good status with an answer that cannot be read tells nothing about what was kept.
  const { fields = [] } = problem.problem;
  const isAhead = fields.length > 0 && fields.every((field) => field.code === allTooEarly);
  return isAhead || problem.offline || status < 400 || status >= 500 || [401, 408, 429].includes(status);
}

export class UnsentSender {
  private snapshot = nothingUnsent;
  private readonly listeners = new Set<() => void>();
  private readonly answered = new Set<(permitId: string, answer: EventsAnswer) => void>();
  private readonly sent = new Set<(nouns: readonly string[]) => void>();
  private waitMs = firstWaitMs;
  private timer: ReturnType<typeof setTimeout> | null = null;
  private going: Promise<void> | null = null;
  private isAskedAgain = false;
  /** A demo brings the server's clock along first. */
  beforeSending: (() => Promise<void>) | null = null;
  /** Everything that was kept here is with the server. */
  afterAll: (() => void) | null = null;

  constructor(private readonly accountId: string) {
    if (typeof window !== 'undefined') window.addEventListener('online', () => this.now());
  }

  read = (): Unsent => this.snapshot;

  subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };

  onAnswer(listener: (permitId: string, answer: EventsAnswer) => void): () => void {
    this.answered.add(listener);
    return () => this.answered.delete(listener);
  }

  onSent(listener: (nouns: readonly string[]) => void): () => void {
    this.sent.add(listener);
    return () => this.sent.delete(listener);
  }

  /** Something was written, or somebody asks: try without waiting. */
  now(): void {
    this.waitMs = firstWaitMs;
    void this.flush();
  }

  /** One whole pass. Asked again while on its way, it makes one more pass. */
  flush(): Promise<void> {
    if (this.going) {
      this.isAskedAgain = true;
      return this.going;
    }
    this.rest();
    this.going = this.pass().finally(() => {
      this.going = null;
      if (!this.isAskedAgain) return;
      this.isAskedAgain = false;
      void this.flush();
    });
    return this.going;
  }

  private async pass(): Promise<void> {
    let store: PhoneStore;
    try {
      store = await phoneStore(this.accountId);
    } catch {
      // Where nothing can be kept, nothing is unsent.
      return;
    }
    await this.count(store, this.snapshot.isOffline);
    if (this.snapshot.count === 0) return;
    try {
      await this.sendAllEvents(store);
      await this.sendDiaries(store);
      await this.sendPhotos(store);
      this.waitMs = firstWaitMs;
      await this.count(store, false);
      if (this.snapshot.count === 0) this.afterAll?.();
    } catch (problem) {
      await this.count(store, problem instanceof ApiProblem && problem.offline);
      this.later();
    }
  }

  /** Tries no more until somebody asks again. */
  rest(): void {
    if (this.timer) clearTimeout(this.timer);
    this.timer = null;
  }

  private later(): void {
    this.timer ??= setTimeout(() => {
      this.timer = null;
      void this.flush();
    }, this.waitMs);
    this.waitMs = Math.min(longestWaitMs, this.waitMs * 2);
  }

  private async count(store: PhoneStore, isOffline: boolean): Promise<void> {
    const [events, diaries, photos, refused] = await Promise.all([
      store.count('event'),
      store.count('diary'),
      store.count('photo'),
      store.count('aside'),
    ]);
    this.snapshot = { count: events + diaries + photos, events, diaries, photos, refused, isOffline };
    for (const listener of this.listeners) listener();
  }

  private async sendAllEvents(store: PhoneStore): Promise<void> {
    for (;;) {
      const rows = await store.firstEvents(batchEvents);
      const [first] = rows;
      if (!first) return;
      await this.sendBatch(store, first.permitId, rows);
    }
  }

  private async sendBatch(store: PhoneStore, permitId: string, rows: readonly EventRow[]): Promise<void> {
    try {
      // Only now: what these rows tell of has been read, so a demo's clock is level with all of it.
      await this.beforeSending?.();
      const answer = await callDoor(sendEvents, {
        params: { permitId },
        body: { events: rows.map((row) => row.event) },
      });
      const done = new Set([...answer.stored, ...answer.known]);
      const refused = new Map(answer.refused.map((one) => [one.id, one.code === tooEarly ? 'keep' : one.code]));
      // What the answer does not name counts as not answered: it would be sent again, so one that names none must not loop.
      if (!rows.some((row) => done.has(row.id) || refused.has(row.id))) throw new Error('answer names no event');
      await this.settle(store, rows, (row) => (done.has(row.id) ? 'forget' : (refused.get(row.id) ?? 'keep')));
      for (const listener of this.answered) listener(permitId, answer);
      if (done.size > 0) this.announce(sendEvents.touches);
      // Two clocks that differ: what lies ahead for the server now will not for long.
      if (answer.refused.some((one) => one.code === tooEarly)) throw new Error('ahead of the server');
    } catch (problem) {
      if (!(problem instanceof ApiProblem) || isForLater(problem)) throw problem;
      await this.settleRefused(store, rows, problem.problem);
    }
  }

  /** A whole batch refused: what is named is put aside, or kept if it is only early; the others are tried again without it. */
  private async settleRefused(store: PhoneStore, rows: readonly EventRow[], problem: Problem): Promise<void> {
    const named = new Map(
      (problem.fields ?? []).map((field) => [
        Number(/^(?:body\.)?events\.(\d+)/.exec(field.path)?.[1] ?? -1),
        field.code,
      ]),
    );
    const isNamed = rows.some((_row, place) => named.has(place));
    await this.settle(store, rows, (row) => {
      const code = isNamed ? named.get(rows.indexOf(row)) : problem.code;
      return code === undefined || code === `event_${tooEarly}` ? 'keep' : code;
    });
    if ([...named.values()].includes(`event_${tooEarly}`)) throw new Error('ahead of the server');
  }

  private async settle(store: PhoneStore, rows: readonly EventRow[], fateOf: (row: EventRow) => string): Promise<void> {
    const fates = rows.map((row) => ({ row, fate: fateOf(row) })).filter(({ fate }) => fate !== 'keep');
    const asides = fates
      .filter(({ fate }) => fate !== 'forget')
      .map(({ row, fate }): AsideRow => ({ id: row.id, kind: 'event', sessionId: null, code: fate, content: row }));
    await store.settleEvents(
      fates.map(({ row }) => row.id),
      asides,
    );
  }

  private async sendDiaries(store: PhoneStore): Promise<void> {
    for (const row of await store.diaries()) {
      await this.sendOne(store, 'diary', row, () =>
        callDoor(writeDiary, { params: { sessionId: row.sessionId }, body: row.body, key: row.key }),
      );
      this.announce(writeDiary.touches);
    }
  }

  private async sendPhotos(store: PhoneStore): Promise<void> {
    for (const row of await store.photos()) {
      await this.sendOne(store, 'photo', row, () =>
        callDoor(addPhoto, {
          params: { sessionId: row.sessionId },
          body: { consent: 'true' },
          key: row.key,
          file: row.photo,
        }),
      );
      this.announce(addPhoto.touches);
    }
  }

  private async sendOne(
    store: PhoneStore,
    kind: 'diary' | 'photo',
    row: { key: string; sessionId: string },
    send: () => Promise<unknown>,
  ): Promise<void> {
    let code: string | null = null;
    try {
      await send();
    } catch (problem) {
      // A diary of a session whose end is still on its way is not wrong, only early.
      if (!(problem instanceof ApiProblem) || isForLater(problem) || problem.problem.code === 'session.not_ended')
        throw problem;
      // Written already, by this phone before a lost answer or by another: then it is there.
      code = problem.problem.code === 'diary.already_written' ? null : problem.problem.code;
    }
    if (code !== null && kind === 'photo') return store.keepPhotoAside({ id: row.key, sessionId: row.sessionId, code });
    if (code !== null) await store.keepAside({ id: row.key, kind, sessionId: row.sessionId, code, content: row });
    await store.forget(kind, row.key);
  }

  private announce(nouns: readonly string[]): void {
    for (const listener of this.sent) listener(nouns);
  }
}

const senders = new Map<string, UnsentSender>();

/** The one sender of an account in this page. */
export function senderOf(accountId: string): UnsentSender {
  let sender = senders.get(accountId);
  if (!sender) {
    sender = new UnsentSender(accountId);
    senders.set(accountId, sender);
  }
  return sender;
}
