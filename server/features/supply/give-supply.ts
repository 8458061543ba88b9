// Gives supplies of one lot; the earlier ones of that kind end. How long a lot serves is the house's default.

import { lockParticipantInReach } from '@/db/queries/reach';
import { insertSupply } from '@/db/queries/supply';
import { action, notFound, refuse } from '@/server/action';
import { viewSupply } from '@/server/features/supply/view-supply';
import { giveSupply as contract } from '@/shared/contracts/device';
import { openedAtOf } from '@/shared/rules/supply-opening';
import { supplyLife } from '@/shared/rules/protocol-defaults';

export const giveSupply = action(contract, async ({ actor, params, body }, tx) => {
  const participant = await lockParticipantInReach(tx.db, actor, params.participantId);
  if (!participant) return notFound();
  const now = await tx.now();
  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (participant.closedAt !== null) return refuse('participant.withdrawn', whose);
  const openedAt = openedAtOf(body.openedOn, participant.zone, now);
  if (openedAt === null) {
    return refuse('supply.opened_in_future', { ...whose, fields: [{ path: 'openedOn', code: 'opened_in_future' }] });
  }

  const { kind, lot } = body;
  const supply = await insertSupply(tx.db, {
    ...{ id: crypto.randomUUID(), participantId: participant.id, kind, lot, openedAt, ...supplyLife[kind] },
    ...{ by: actor.accountId, createdAt: now },
  });
  tx.record({ ...whose, subject: { kind: 'supply', id: supply.id }, after: { kind, lot, openedOn: body.openedOn } });
  return viewSupply(supply, participant.zone);
});
