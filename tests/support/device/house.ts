// What: a server in the test's memory that answers the doors of a session as the real one does: each event once, in any order.
// Must not: decide anything; a test sets what it answers.
import type { SessionEvent } from '@/shared/contracts/permit';
import { claimsOf } from './permits';

export interface House {
  events: SessionEvent[];
  calls: string[];
  isReachable: boolean;
  /** The answer reaches the phone only if this holds: the events are stored all the same. */
  answersArrive: boolean;
  rampDown: boolean;
  refuse: Map<string, string>;
  diaries: unknown[];
  fetch: typeof fetch;
}

function answer(body: unknown, status = 200): Response {
  return new Response(JSON.stringify(body), { status, headers: { 'content-type': 'application/json' } });
}

export function house(extra: (path: string, init?: RequestInit) => Response | undefined = () => undefined): House {
  const self: House = {
    events: [],
    calls: [],
    isReachable: true,
    answersArrive: true,
    rampDown: false,
    refuse: new Map(),
    diaries: [],
    fetch: async (input, init) => {
      const path = String(input);
      self.calls.push(`${init?.method ?? 'GET'} ${path}`);
      if (!self.isReachable) throw new TypeError('no network');
      const own = extra(path, init);
      if (own) return own;
      if (path.endsWith('/events')) return take(JSON.parse(String(init?.body)).events);
      if (path.endsWith('/diary')) {
        self.diaries.push(JSON.parse(String(init?.body)));
        return answer(diaryAnswer, 201);
      }
      return answer(
        { type: 'about:blank', title: 'no', status: 404, detail: path, code: 'not_found', requestId: '1' },
        404,
      );
    },
  };
  function take(events: SessionEvent[]): Response {
    const stored: string[] = [];
    const known: string[] = [];
    const refused: { id: string; code: string }[] = [];
    for (const event of events) {
      const code = self.refuse.get(event.kind);
      if (code) refused.push({ id: event.id, code });
      else if (self.events.some((kept) => kept.id === event.id)) known.push(event.id);
      else {
        self.events.push(event);
        stored.push(event.id);
      }
    }
    if (!self.answersArrive) throw new TypeError('the answer was lost');
    return answer({
      stored,
      known,
      refused,
      sessionId: claimsOf().session,
      sessionState: 'running',
      missing: [],
      permit: { state: self.rampDown ? 'void' : 'used', voidedBy: null, rampDown: self.rampDown },
    });
  }
  return self;
}

const diaryAnswer = {
  id: '1f0d9c55-8f5e-4f3a-9b52-0c3f7b8a9d01',
  sessionId: claimsOf().session,
  kind: 'after',
  writtenAt: '2026-05-28T20:26:40.000Z',
  after: null,
  nextDay: null,
  photos: [],
  lockouts: [],
  emergencyAdvice: false,
};
