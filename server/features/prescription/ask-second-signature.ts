// A prescription that needs a second signature waits on the worklist, and the other clinicians of the site hear of it.

import type { PrescriptionRecord } from '@/db/queries/prescription';
import type { ParticipantRecord } from '@/db/queries/reach';
import { listSigners } from '@/db/queries/signature';
import { openItem } from '@/db/queries/worklist';
import type { Tx } from '@/server/action';
import { secondSignatureMatter } from '@/shared/rules/prescription-signing';

export async function askSecondSignature(
  tx: Tx,
  participant: ParticipantRecord,
  draft: PrescriptionRecord,
  signerId: string,
  now: string,
): Promise<void> {
  await openItem(tx.db, {
    id: crypto.randomUUID(),
    siteId: participant.siteId,
    participantId: participant.id,
    level: 'due',
    why: 'second_signature',
    facts: { intensityMilliamp: draft.dose.intensityMilliamp, minutes: draft.minutes },
    matter: secondSignatureMatter(draft.id),
    prescriptionId: draft.id,
    openedAt: now,
  });
  for (const signer of await listSigners(tx.db, participant.siteId)) {
    if (signer.accountId === signerId) continue;
    tx.tell({
      kind: 'second_signature_asked',
      toEmail: signer.email,
      language: signer.language,
      facts: { name: signer.name, code: participant.code, path: `/participants/${participant.id}/prescription` },
      key: `second_signature_asked:${draft.id}:${signer.accountId}`,
    });
  }
}
