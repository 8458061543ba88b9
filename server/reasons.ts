// Rules answer with codes; people read sentences. Adds to each reason its sentence and whom to call. Decides nothing.

import type { Db } from '@/db/client';
import { findContactOfParticipant } from '@/db/queries/site-contact';
import type { BareReason } from '@/server/action';
import type { Reason } from '@/shared/contracts/problem';
import { hasWords, momentInWords, sentence } from '@/server/words';

/** Reasons that pass by themselves, or that the asker clears, need nobody's telephone. */
const needsNobody: readonly string[] = ['participant', 'time'];

export async function explainReasons(
  db: Db,
  reasons: readonly BareReason[],
  participantId: string | undefined,
): Promise<Reason[]> {
  if (reasons.length === 0) return [];
  const found = participantId ? await findContactOfParticipant(db, participantId) : null;
  const language = found?.language ?? 'en';
  return reasons.map((reason) => ({
    code: reason.code,
    sentence: sentenceOf(reason, found?.zone ?? 'UTC', found?.site ?? null, language),
    resolvedBy: reason.resolvedBy,
    contact:
      found && !needsNobody.includes(reason.resolvedBy) ? { name: found.site.name, phone: found.site.phone } : null,
    until: reason.until ?? null,
    fact: reason.fact ?? null,
  }));
}

function sentenceOf(
  reason: BareReason,
  zone: string,
  site: { name: string; phone: string } | null,
  language: string,
): string {
  const plain = `clearance:reason.${reason.code}`;
  const timed = `${plain}_until`;
  const key = reason.until && hasWords(timed) ? timed : plain;
  const facts = {
    until: reason.until ? momentInWords(reason.until, zone, language) : '',
    fact: reason.fact ?? '',
    siteName: site?.name ?? '',
    sitePhone: site?.phone ?? '',
  };
  return sentence(hasWords(key) ? key : 'errors:reason.other', facts, language);
}
