// The hashes that signatures are given for: SHA-256 of the one canonical text of a content. Whoever signs, shows or judges a signed
// record computes them here, anew from what stands in the row. Signs nothing.

import { createHash } from 'node:crypto';
import type { PrescriptionContent } from '@/db/queries/prescription';
import { canonicalJson, type Canonical } from '@/shared/values/canonical';
import type { ProtocolSettings } from '@/shared/values/protocol-settings';

const hashOf = (content: Canonical) => createHash('sha256').update(canonicalJson(content)).digest('hex');

export function prescriptionHashOf(content: PrescriptionContent): string {
  const { participantId, amendsId, reason, dose, schedule, assisted } = content;
  const electrodes = dose.electrodes.map((electrode) => ({ ...electrode }));
  return hashOf({
    ...{ participantId, amendsId, reason, assisted },
    dose: { ...dose, electrodes },
    schedule: { ...schedule },
  });
}

export function reviewHashOf(
  content: Readonly<Record<'itemId' | 'finding' | 'decision' | 'reason', string>> & {
    grading: Readonly<Record<string, string | boolean>> | null;
  },
): string {
  const { itemId, finding, decision, reason, grading } = content;
  return hashOf({ itemId, finding, decision, reason, grading: grading && { ...grading } });
}

export function protocolHashOf(content: {
  siteId: string;
  version: number;
  settings: ProtocolSettings;
  reason: string;
}): string {
  const { siteId, version, settings, reason } = content;
  // As it will be kept: a setting that is not said is no key.
  return hashOf({ siteId, version, settings: JSON.parse(JSON.stringify(settings)), reason });
}

/**
 * Whether what stands there is what was signed: its own hash, and each of the signatures on it, say so.
 * @param isSigned it counts as signed, so that there must be a signature
 */
export function isIntact(isSigned: boolean, computed: string, stored: string, signed: readonly string[]): boolean {
  return computed === stored && signed.every((hash) => hash === computed) && (!isSigned || signed.length > 0);
}
