// One's own permit with its present state: how the phone learns that it is void.

import { findPermit } from '@/db/queries/permit';
import { action, notFound } from '@/server/action';
import { viewPermit } from '@/server/features/permit/view-permit';
import { readPermit as contract } from '@/shared/contracts/permit';

export const readPermit = action(contract, async ({ actor, params }, tx) => {
  const permit = await findPermit(tx.db, params.permitId);
  if (!permit || permit.participantId !== actor.participantId) return notFound();
  const now = await tx.now();
  const { participantId, siteId } = permit;
  tx.record({ participantId, siteId, kind: 'read', subject: { kind: 'permit', id: permit.id } });
  return viewPermit(tx.db, permit, now);
});
