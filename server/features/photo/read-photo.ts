// The bytes of one photo, for its participant and for staff of the site who may see it. Every look is on record.

import { findPhotoBytes, findPhotoOwner } from '@/db/queries/photo';
import { findParticipantInReach } from '@/db/queries/reach';
import { action, notFound } from '@/server/action';
import { readPhoto as contract } from '@/shared/contracts/session';

export const readPhoto = action(contract, async ({ actor, params }, tx) => {
  const owner = await findPhotoOwner(tx.db, params.photoId);
  const participant = owner && (await findParticipantInReach(tx.db, actor, owner.participantId));
  const bytes = participant && (await findPhotoBytes(tx.db, params.photoId));
  if (!participant || !bytes) return notFound();
  const { id, siteId } = participant;
  tx.record({ participantId: id, siteId, kind: 'read', subject: { kind: 'photo', id: params.photoId } });
  // A copy: the driver's buffer is a view into a larger one.
  return { type: 'image/jpeg', bytes: new Uint8Array(bytes) } as const;
});
