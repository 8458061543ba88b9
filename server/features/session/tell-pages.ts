// Pages the first contact of the site's protocol for each row that is paged. The mail names the site and the code, nothing else.

import { readProtocolInForce } from '@/db/queries/protocol';
import { findPageFacts } from '@/db/queries/site-contact';
import type { Tx } from '@/server/action';
import { firstPages, type Consequences } from '@/shared/rules/consequences';

export async function tellPages(
  tx: Tx,
  consequences: Consequences,
  participantId: string,
  siteId: string,
): Promise<void> {
  if (consequences.paged.length === 0) return;
  const facts = await findPageFacts(tx.db, participantId);
  const protocol = await readProtocolInForce(tx.db, siteId);
  if (!facts) return;
  for (const page of firstPages(consequences, protocol?.settings.contacts ?? [], facts)) tx.tell(page);
}
