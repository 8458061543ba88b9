// Suspends a member of staff of an own site, which signs them out everywhere, or lets them back.

import { endSessions } from '@/db/queries/account';
import { lockStaff, setAccountState } from '@/db/queries/site';
import { action, notFound, refuse } from '@/server/action';
import { viewStaff } from '@/server/features/site/view-staff';
import { suspendStaff as contract } from '@/shared/contracts/site';

export const suspendStaff = action(contract, async ({ actor, params, body }, tx) => {
  const staff = await lockStaff(tx.db, actor.siteIds, params.accountId);
  if (!staff || staff.accountId === null) return notFound();
  const [siteId] = staff.siteIds;
  // Whoever locks the last door from the inside needs another key.
  if (staff.accountId === actor.accountId) return refuse('staff.oneself', { siteId });

  const state = body.suspended ? ('suspended' as const) : ('active' as const);
  await setAccountState(tx.db, staff.accountId, state);
  if (body.suspended) await endSessions(tx.db, staff.accountId);
  tx.record({
    siteId,
    subject: { kind: 'account', id: staff.accountId },
    before: { state: staff.state },
    after: { state },
    why: body.reason,
  });
  return viewStaff({ ...staff, state });
});
