// Stops a caregiver's mails by the link that stands in them. Nobody needs to sign in for that, and a second click changes nothing.

import { findCaregiverByStopToken, stopCaregiverMails } from '@/db/queries/account';
import { action, refuse } from '@/server/action';
import { hashOfMailToken } from '@/server/invitation';
import { stopMails as contract } from '@/shared/contracts/account';

export const stopMails = action(contract, async ({ body }, tx) => {
  const found = await findCaregiverByStopToken(tx.db, hashOfMailToken(body.token));
  if (!found) return refuse('mail_stop.unknown');
  // A caregiver who was removed gets no mails any more: that, too, is stopped.
  if (found.isOpen && (await stopCaregiverMails(tx.db, found.id, await tx.now()))) {
    tx.record({
      participantId: found.participantId,
      subject: { kind: 'caregiver', id: found.id },
      after: { mailsStopped: true },
    });
  }
  return { stopped: true as const };
});
