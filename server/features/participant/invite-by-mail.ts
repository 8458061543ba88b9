// Writes an invitation of a participant and the mail that carries its link. The caller has decided that it may be sent.

import { insertInvitation } from '@/db/queries/invitation';
import type { AccountActor, Tx } from '@/server/action';
import { newMailToken } from '@/server/invitation';
import { invitationEnd } from '@/shared/rules/house-terms';

export interface Invited {
  id: string;
  name: string;
  email: string;
  language: string;
  siteId: string;
}

/** Answers with the instant at which the link ends. */
export async function inviteByMail(
  tx: Tx,
  actor: AccountActor,
  person: Invited,
  siteName: string,
  now: string,
): Promise<string> {
  const { token, hash } = newMailToken();
  const { name, email, siteId } = person;
  const id = crypto.randomUUID();
  const expiresAt = invitationEnd(now);
  await insertInvitation(tx.db, {
    ...{ id, role: 'participant', email, name, siteId, subjectId: person.id, tokenHash: hash },
    ...{ invitedBy: actor.name, createdAt: now, expiresAt },
  });
  tx.tell({
    kind: 'participant_invitation',
    toEmail: email,
    language: person.language,
    facts: { name, siteName, path: `/invitation#token=${token}` },
    key: `participant_invitation:${id}`,
    dropAt: expiresAt,
  });
  return expiresAt;
}
