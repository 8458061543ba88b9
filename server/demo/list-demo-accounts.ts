// The demo's people, so that the sign-in page can offer them. Only with DEMO=1.

import { listAccounts, listInvitedParticipants } from '@/db/queries/account';
import { loadStanding } from '@/db/queries/participant-standing';
import { action } from '@/server/action';
import { demoPassword } from '@/server/demo/demo-password';
import { listDemoAccounts as contract } from '@/shared/contracts/house';
import { standingOf } from '@/shared/rules/participant-standing';

/** The demo has about sixty; a list that somebody filled further is cut (own choice). */
const mostListed = 200;

export const listDemoAccounts = action(contract, async (_input, tx) => {
  const now = await tx.now();
  const accounts = await listAccounts(tx.db, mostListed);
  const invited = await listInvitedParticipants(tx.db, mostListed);
  const participantIds = [...accounts, ...invited].flatMap(({ participantId }) => participantId ?? []);
  const standings = await loadStanding(tx.db, participantIds, now);
  const stateOf = (participantId: string | null) => {
    const standing = participantId === null ? undefined : standings.get(participantId);
    return standing ? standingOf(standing, now).state : null;
  };
  return [...accounts, ...invited].map(({ email, name, role, siteNames, participantId }) => ({
    ...{ email, name, role, password: demoPassword },
    site: siteNames.join(', '),
    state: stateOf(participantId),
  }));
});
