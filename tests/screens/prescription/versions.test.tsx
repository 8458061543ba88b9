// The list of versions: one whose content is not what was signed says so, and what to do; the others say nothing of it.
import { screen } from '@testing-library/react';
import { axe } from 'jest-axe';
import { VersionsCard } from '@/components/features/prescription/VersionsCard';
import type { PrescriptionView } from '@/shared/contracts/prescription';
import { dose, ids, now, serve, show, zone } from '../../support/pages/participant';

const { chargeCoulomb, minutes, electrodes, ...prescribed } = dose;

const version = (change: Partial<PrescriptionView>): PrescriptionView => ({
  ...{ id: ids.precheck, courseId: ids.course, participantId: ids.participant, version: 1, status: 'signed' },
  dose: { ...prescribed, electrodes: electrodes.map((pad) => ({ ...pad, shape: 'pad' as const })) },
  schedule: {
    ...{
      startsOn: '2026-03-01',
      days: [1, 3],
      hoursFrom: '07:00',
      hoursTo: '22:00',
      sessionsTotal: 20,
      minGapHours: 20,
    },
    ...{ maxPerDay: 1, maxPer7Days: 5, expiresOn: '2026-05-01', makeUpMissed: true },
  },
  ...{ assisted: false, reason: null, amendsId: null, verdict: 'accept', rows: [], contentHash: 'a' },
  computed: { chargeCoulomb, minutes, maxDensityMilliampPerSquareCentimetre: 0.057 },
  signatures: [{ name: 'Oona Feld', role: 'clinician', meaning: 'prescribed', at: now, contentHash: 'a' }],
  ...{ isIntact: true, createdAt: now, signedAt: now, acknowledgedAt: now, livePermits: 0 },
  ...change,
});

beforeEach(() => void serve({}));

test('a version that was altered is marked invalid, with what to do', async () => {
  const { container } = show(<VersionsCard versions={[version({ isIntact: false })]} zone={zone} />);
  expect(screen.getByText('The signature is not valid: this is not what was signed')).toBeDefined();
  expect(screen.getByText(/No session can start on it/)).toBeDefined();
  expect(await axe(container)).toHaveNoViolations();
});

test('a version that is as it was signed says nothing of that', () => {
  show(<VersionsCard versions={[version({})]} zone={zone} />);
  expect(screen.getByText(/Oona Feld/)).toBeDefined();
  expect(screen.queryByText(/not valid/)).toBeNull();
});
