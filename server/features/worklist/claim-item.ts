// Somebody takes a row, which acknowledges a page and stops its escalation, or gives it back.

import { findParticipantInReach } from '@/db/queries/reach';
import { findItem, insertClaim, lockItem, setEscalation } from '@/db/queries/worklist';
import { action, notFound, refuse } from '@/server/action';
import { viewItems } from '@/server/features/worklist/view-items';
import { claimItem as contract } from '@/shared/contracts/worklist';
import { escalatesAgainAt } from '@/shared/rules/worklist-next';

export const claimItem = action(contract, async ({ actor, params, body }, tx) => {
  const found = await findItem(tx.db, params.itemId);
  const participant = found && (await findParticipantInReach(tx.db, actor, found.participantId));
  const item = participant && (await lockItem(tx.db, params.itemId));
  if (!participant || !item) return notFound();
  const now = await tx.now();

  const whose = { participantId: participant.id, siteId: item.siteId };
  if (item.closedAt !== null) return refuse('worklist.closed', whose);

  const accountId = body.claim ? actor.accountId : null;
  if (accountId !== item.ownerAccountId) {
    await insertClaim(tx.db, {
      id: crypto.randomUUID(),
      itemId: item.id,
      accountId,
      by: actor.accountId,
      createdAt: now,
    });
    await setEscalation(tx.db, item.id, body.claim ? null : escalatesAgainAt(item.level, now));
    tx.record({
      ...whose,
      subject: { kind: 'worklist_item', id: item.id },
      before: { owner: item.ownerAccountId },
      after: { owner: accountId },
    });
  }
  const claimed = (await findItem(tx.db, item.id)) ?? item;
  const [view] = await viewItems(tx.db, actor, [claimed], now);
  return view ?? notFound();
});
