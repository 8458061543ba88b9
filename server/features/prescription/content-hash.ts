// The hash that a signature on a prescription is given for: SHA-256 of the one canonical text of its content. Signs nothing.

import { createHash } from 'node:crypto';
import type { PrescriptionContent } from '@/db/queries/prescription';
import { canonicalJson } from '@/shared/values/canonical';

export function contentHashOf(content: PrescriptionContent): string {
  const { participantId, amendsId, reason, dose, schedule, assisted } = content;
  const electrodes = dose.electrodes.map((electrode) => ({ ...electrode }));
  const text = canonicalJson({
    participantId,
    amendsId,
    reason,
    dose: { ...dose, electrodes },
    schedule: { ...schedule },
    assisted,
  });
  return createHash('sha256').update(text).digest('hex');
}
