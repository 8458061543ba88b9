// Who may sign a prescription next, and whether the signature is the last one that it needs. Limits and schedule are judged
// beside this; nothing here knows a dose.

import type { Tier } from '@/shared/values/codes';

export type PrescribingMeaning = 'prescribed' | 'second_signature';

export type SigningFacts = {
  /** Signed with all signatures, or closed (superseded, discarded, its course ended). */
  readonly isSigned: boolean;
  readonly isClosed: boolean;
  /** The version that this one amends; null for a first one. */
  readonly amendsId: string | null;
  /** The version in force now; null if there is none. */
  readonly inForceId: string | null;
  readonly isParticipantWithdrawn: boolean;
  readonly isCourseClosed: boolean;
  /** What the signer saw is what is stored. */
  readonly isSameContent: boolean;
  /** The worse of the tier at writing and the tier by the limits in force now. */
  readonly tier: Tier;
  readonly signatures: readonly { readonly accountId: string; readonly meaning: string }[];
};

export type SigningRefusal =
  | 'participant.withdrawn'
  | 'version.stale'
  | 'prescription.already_signed'
  | 'prescription.not_awaiting'
  | 'prescription.same_signer';

export type SigningAnswer =
  | { readonly allowed: false; readonly code: SigningRefusal }
  /** `takesEffect`: no further signature is needed. */
  | { readonly allowed: true; readonly takesEffect: boolean };

function refusalOf(facts: SigningFacts, asker: string, meaning: PrescribingMeaning): SigningRefusal | null {
  if (facts.isParticipantWithdrawn) return 'participant.withdrawn';
  if (facts.isClosed || facts.isCourseClosed) return 'version.stale';
  if (facts.isSigned) return 'prescription.already_signed';
  if (facts.amendsId !== facts.inForceId || !facts.isSameContent) return 'version.stale';
  const prescribed = facts.signatures.find((signature) => signature.meaning === 'prescribed');
  if (meaning === 'prescribed') return prescribed ? 'prescription.already_signed' : null;
  if (!prescribed) return 'prescription.not_awaiting';
  // One person in two roles is one signature (21 CFR 11.200).
  return facts.signatures.some((signature) => signature.accountId === asker) ? 'prescription.same_signer' : null;
}

export function signing(facts: SigningFacts, asker: string, meaning: PrescribingMeaning): SigningAnswer {
  const code = refusalOf(facts, asker, meaning);
  if (code !== null) return { allowed: false, code };
  const meanings = new Set([...facts.signatures.map((signature) => signature.meaning), meaning]);
  const takesEffect = meanings.has('prescribed') && (facts.tier === 'accept' || meanings.has('second_signature'));
  return { allowed: true, takesEffect };
}

/** The worklist's matter of a prescription that waits for its second signature. */
export function secondSignatureMatter(prescriptionId: string): string {
  return `second_signature:${prescriptionId}`;
}
