// A page that nobody has acknowledged goes to the next contact of the protocol, round and round, until somebody takes the row.

import { findNextEscalation, listDueEscalations, lockEscalation, setEscalation } from '@/db/queries/escalation';
import { readProtocolInForce } from '@/db/queries/protocol';
import { findPageFacts } from '@/db/queries/site-contact';
import type { Job } from '@/server/action';
import { escalationAfter, pageAt } from '@/shared/rules/consequences';
import { jobBatch } from '@/shared/rules/house-limits';

export const escalatePages: Job = {
  name: 'worklist.escalate',
  listDue: (db, now) => listDueEscalations(db, now, jobBatch),
  nextDue: findNextEscalation,
  async run(id, tx) {
    const item = await lockEscalation(tx.db, id);
    const now = await tx.now();
    if (!item || item.escalateAt === null || item.escalateAt > now) return;
    const { participantId, siteId } = item;
    const step = item.escalation + 1;
    const about = await findPageFacts(tx.db, participantId);
    const protocol = await readProtocolInForce(tx.db, siteId);
    const page = about && pageAt(protocol?.settings.contacts ?? [], { itemId: id, ...about }, step);
    await setEscalation(tx.db, id, step, escalationAfter(now));
    if (page) tx.tell(page);
    tx.record({
      participantId,
      siteId,
      subject: { kind: 'worklist_item', id },
      after: { step, told: page?.facts.name ?? null },
    });
  },
};
