// A signed look at a row of the worklist: finding, decision, reason, and for a clinician the grading. Lifting ends the row's
// lockout; no other lockout is touched.

import { reviewHashOf } from '@/db/queries/content-hash';
import { closeLockout } from '@/db/queries/lockout';
import { lockParticipantInReach } from '@/db/queries/reach';
import { insertReview, lockOpenLockout } from '@/db/queries/review';
import { insertSignature } from '@/db/queries/signature';
import { closeItem, findItem, lockItem, setEscalation } from '@/db/queries/worklist';
import { action, confirmedOf, notFound, refuse } from '@/server/action';
import { recordReview as contract } from '@/shared/contracts/worklist';
import { reviewing } from '@/shared/rules/review';

export const recordReview = action(contract, async ({ actor, body, confirmedAt }, tx) => {
  const found = await findItem(tx.db, body.itemId);
  const participant = found && (await lockParticipantInReach(tx.db, actor, found.participantId));
  const item = participant && (await lockItem(tx.db, body.itemId));
  if (!participant || !item) return notFound();
  const now = await tx.now();

  const whose = { participantId: participant.id, siteId: item.siteId };
  const lockout = item.lockoutId === null ? null : await lockOpenLockout(tx.db, item.lockoutId, now);
  const { itemId, finding, decision, reason, grading = null } = body;
  const answer = reviewing({
    ...{ decision, role: actor.role, isItemClosed: item.closedAt !== null, hasGrading: grading !== null },
    lockoutLevel: lockout?.level ?? null,
  });
  if (!answer.allowed) return refuse(answer.code, whose);

  const id = crypto.randomUUID();
  const contentHash = reviewHashOf({ itemId, finding, decision, reason, grading });
  const { accountId, name, role } = actor;
  await insertReview(tx.db, {
    id,
    ...{ itemId, participantId: participant.id, finding, decision, reason, grading },
    accountId,
    name,
    contentHash,
    createdAt: now,
  });
  for (const meaning of grading === null ? (['reviewed'] as const) : (['reviewed', 'graded'] as const)) {
    const signed = {
      id: crypto.randomUUID(),
      subjectKind: 'review',
      subjectId: id,
      meaning,
      contentHash,
      createdAt: now,
      confirmedAt: confirmedOf(confirmedAt),
    } as const;
    await insertSignature(tx.db, { ...signed, accountId, name, role });
  }
  if (answer.closesLockout && lockout) await closeLockout(tx.db, lockout.id, now, 'lifted');
  if (answer.closesItem) await closeItem(tx.db, itemId, now, decision);
  // Whoever signed a look at it has acknowledged the page.
  else await setEscalation(tx.db, itemId, null);

  tx.record({
    ...whose,
    subject: { kind: 'review', id },
    before: { why: item.why, level: item.level, lockout: lockout?.level ?? null },
    after: { decision, finding, grading, itemClosed: answer.closesItem, lockoutClosed: answer.closesLockout },
    why: reason,
  });
  return { id, at: now, itemClosed: answer.closesItem, lockoutClosed: answer.closesLockout };
});
