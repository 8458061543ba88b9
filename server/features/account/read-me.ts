// Who is signed in: role, sites, own record, whether a second factor is asked, and the server's clock.

import { findActor, listSiteIdsOfCaregiver } from '@/db/queries/account';
import { loadStanding } from '@/db/queries/participant-standing';
import { findContactOfParticipant, listSiteContacts } from '@/db/queries/site-contact';
import { action, notFound, type AccountActor, type Tx } from '@/server/action';
import { readMe as contract } from '@/shared/contracts/account';
import { standingOf } from '@/shared/rules/participant-standing';
import { isStaffRole } from '@/shared/values/roles';

export const readMe = action(contract, async ({ actor }, tx) => {
  const { accountId, email, name, role, language } = actor;
  const found = await findActor(tx.db, accountId);
  if (!found) return notFound();
  const own = await ownRecord(actor, tx);
  const siteIds = role === 'caregiver' ? await listSiteIdsOfCaregiver(tx.db, accountId) : actor.siteIds;
  return {
    account: { id: accountId, email, name, role, language },
    sites: own ? [own.site] : await listSiteContacts(tx.db, siteIds),
    participant: own ? own.participant : null,
    secondFactor: { enabled: found.secondFactor, required: !tx.isDemo && isStaffRole(role) },
    demo: tx.isDemo,
    now: await tx.now(),
  };
});

async function ownRecord({ participantId }: AccountActor, tx: Tx) {
  if (participantId === null) return null;
  const now = await tx.now();
  const contact = await findContactOfParticipant(tx.db, participantId);
  const standing = (await loadStanding(tx.db, [participantId], now)).get(participantId);
  if (!contact || !standing) return null;
  const { state } = standingOf(standing, now);
  const courseId = standing.course?.id ?? null;
  return {
    site: contact.site,
    participant: { id: participantId, code: contact.code, zone: contact.zone, courseId, state },
  };
}
