// An invitation that may be accepted now, or why not. Changes nothing.

import type { InvitationRow } from '@/db/queries/account';
import { refuse, type Refusal } from '@/server/action';

export function openInvitation(invitation: InvitationRow | null, now: string): InvitationRow | Refusal {
  if (!invitation) return refuse('invitation.unknown');
  const { siteId, closedWhy, closedAt, expiresAt } = invitation;
  if (closedWhy === 'accepted') return refuse('invitation.used', { siteId });
  // Replaced by a newer one, or taken back: for whoever holds the link it has ended.
  if (closedAt !== null || expiresAt <= now) return refuse('invitation.expired', { siteId });
  return invitation;
}
