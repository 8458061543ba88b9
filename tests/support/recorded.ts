// The record of an invented person who may start, as the database's queries hand it to `gatherFacts`. The same person as
// `clearedFacts`, an adult in Berlin. Never used outside tests.

import type { Gathered } from '@/shared/rules/clearance/gather';
import { defaultProtocolSettings } from '@/shared/rules/protocol-defaults';
import type { SiteLimits } from '@/shared/values/protocol-settings';

export type RecordedPrescription = NonNullable<Gathered['person']['prescription']>;

const pad = { shape: 'pad', areaSquareCentimetre: 100, share: 1 } as const;
export const recordedPrescription: RecordedPrescription = {
  version: 2,
  signedAt: '2026-05-01T09:00:00Z',
  closedAt: null,
  expiresAt: '2026-11-30T23:00:00Z',
  tier: 'second_signature',
  waveform: 'tDCS',
  intensityUa: 2000,
  rampUpMs: 30_000,
  holdMs: 1_200_000,
  rampDownMs: 30_000,
  chargeUc: 2_460_000,
  onMs: 1_260_000,
  electrodes: [
    { position: 'F3', polarity: 'anode', ...pad },
    { position: 'Fp2', polarity: 'cathode', ...pad },
  ],
  sessionsTotal: 20,
  maxPerDay: 1,
  maxPer7Days: 5,
  minGapMs: 72_000_000,
  hoursFrom: '07:00',
  hoursTo: '22:00',
  assisted: false,
};

export const recordedSession: Gathered['sessions'][number] = {
  startedAt: '2026-05-11T15:30:00Z',
  endedAt: '2026-05-11T15:51:00Z',
  upperUc: 2_460_000,
  upperMs: 1_260_000,
  closedAt: '2026-05-11T15:52:00Z',
  closedWhy: 'recorded',
  permitExpiresAt: '2026-05-11T16:00:00Z',
  plannedUc: 2_460_000,
  plannedMs: 1_260_000,
  hasDiary: true,
};

export const recorded: Gathered = {
  person: {
    participant: { id: 'p1', bornOn: '1984-03-02', zone: 'Europe/Berlin', accountId: 'a1', closedAt: null },
    accountState: 'active',
    course: { closedAt: null },
    pauseId: null,
    prescription: recordedPrescription,
    screening: { outcome: 'clear', validUntil: '2026-12-20T00:00:00Z' },
    training: { signedOff: true, validUntil: '2026-12-20T00:00:00Z' },
    deviceId: 'd1',
    deviceState: 'out',
    precheck: { answeredAt: '2026-05-12T15:55:00Z', accountId: 'a1', outcome: 'go_on', helperPresent: false },
    openPermit: null,
    ownConsent: '3',
    guardianConsent: null,
    assent: null,
    isConsentWithdrawn: false,
    watched: 1,
    isWatchedNow: false,
    isPrescriptionIntact: true,
    hasSecondSignature: true,
    acknowledgedVersion: 2,
    sessionsDone: 4,
    recallCallAt: null,
  },
  protocol: {
    settings: {
      ...defaultProtocolSettings({
        contacts: [{ name: 'Ada North', email: 'ada@example.org', phone: '+44 1632 960100' }],
        consentRequiredFrom: '2026-01-01T00:00:00Z',
      }),
      consentVersion: 3,
    },
    previousConsentVersion: 2,
  },
  sessions: [recordedSession],
  planned: [],
  lockouts: [],
  supplies: [{ kind: 'sponge', uses: 3, maxUses: 10, openedAt: '2026-05-04T00:00:00Z', maxDays: 14 }],
};

export function withPerson(changes: Partial<Gathered['person']>, of: Gathered = recorded): Gathered {
  return { ...of, person: { ...of.person, ...changes } };
}

export function withPrescription(changes: Partial<RecordedPrescription>, of: Gathered = recorded): Gathered {
  return withPerson({ prescription: { ...recordedPrescription, ...changes } }, of);
}

/** A protocol whose limits are these where they are named, and the shipped rows elsewhere. */
export function withLimits(limits: Partial<SiteLimits>, of: Gathered = recorded): Gathered {
  if (of.protocol === null) return of;
  const { settings } = of.protocol;
  const changed = { ...settings, limits: { ...settings.limits, ...limits } };
  return { ...of, protocol: { ...of.protocol, settings: changed } };
}
