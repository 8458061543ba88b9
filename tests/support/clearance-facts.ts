// Facts of an invented person who may start: an adult in Berlin, one session yesterday, all in order. Tests change one
// thing at a time. Never used outside tests.

import type { ClearanceFacts } from '@/shared/rules/clearance';

/** 18:00 in Berlin. */
export const clearedAt = '2026-05-12T16:00:00Z';

export const clearedFacts: ClearanceFacts = {
  account: { isActive: true },
  asker: 'p1',
  participant: { id: 'p1', bornOn: '1984-03-02', zone: 'Europe/Berlin' },
  consent: {
    signedVersion: 3,
    requiredVersion: 3,
    requiredFrom: '2026-01-01T00:00:00Z',
    previousVersion: 2,
    isWithdrawn: false,
  },
  screening: { isComplete: true, outcome: 'clear', validUntil: '2026-12-20T00:00:00Z' },
  training: { isSignedOff: true, validUntil: '2026-12-20T00:00:00Z' },
  supervision: { requiredSessions: 1, watchedSessions: 1, isWatchedNow: false },
  moodCheck: { dueAt: null },
  prescription: {
    status: 'signed',
    version: 2,
    acknowledgedVersion: 2,
    isIntact: true,
    isPaused: false,
    expiresAt: '2026-11-30T23:00:00Z',
    tier: 'accept',
    hasSecondSignature: false,
    sessionsTotal: 20,
    sessionsDone: 4,
    maxPerDay: 1,
    maxPer7Days: 5,
    minGapHours: 20,
    hoursFrom: '07:00',
    hoursTo: '22:00',
    isAssisted: false,
    dose: { chargeCoulomb: 2.46, minutes: 21 },
  },
  site: { maxCharge24hCoulomb: 7.2, maxCharge7dCoulomb: 25.2, maxMinutes24h: 60 },
  lockouts: [],
  sessions: [
    {
      state: 'closed',
      startedAt: '2026-05-11T15:30:00Z',
      endedAt: '2026-05-11T15:51:00Z',
      chargeCoulomb: 2.46,
      minutes: 21,
      hasDiary: true,
    },
  ],
  missedSinceLast: 0,
  device: { isAssigned: true, isRecalled: false, batteryPercent: 80 },
  supplies: [{ kind: 'sponge', uses: 3, maxUses: 10, openedAt: '2026-05-04T00:00:00Z', maxDays: 14 }],
  precheck: { answeredAt: '2026-05-12T15:55:00Z', answeredBy: 'p1', outcome: 'go_on', isHelperPresent: false },
  livePermits: [],
};

/** A group of facts replaces its fields one by one; a list or a plain fact is replaced whole; undefined = unknown. */
export function withFacts(facts: ClearanceFacts, changes: ClearanceFacts): ClearanceFacts {
  const isGroup = (value: unknown) => typeof value === 'object' && value !== null && !Array.isArray(value);
  const merged = new Map<string, unknown>(Object.entries(facts));
  for (const [key, value] of Object.entries(changes)) {
    const before = merged.get(key);
    merged.set(key, isGroup(before) && isGroup(value) ? Object.assign({}, before, value) : value);
  }
  return Object.fromEntries(merged);
}
