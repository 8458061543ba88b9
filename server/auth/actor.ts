// Who is asking: the session's cookie, then the account with its role and sites. Nothing is cached, so a suspension counts at once.

import type { IncomingHttpHeaders } from 'node:http';
import type { Db } from '@/db/client';
import { findActor } from '@/db/queries/account';
import type { AccountActor } from '@/server/action';
import { isStaffRole } from '@/shared/values/roles';
import type { Auth } from './auth';

export type Asker =
  | { standing: 'anyone' }
  /** Suspended staff; a closed account (a person who withdrew) may still read the own record. */
  | { standing: 'suspended' }
  /** Staff who have not set up the second factor that is required of them. */
  | { standing: 'lacks_second_factor'; actor: AccountActor }
  | { standing: 'known'; actor: AccountActor };

export type WhoIs = (headers: IncomingHttpHeaders) => Promise<Asker>;

/** @param secondFactorRequired of staff; off in the demo */
export function makeWhoIs(auth: Auth, db: Db, secondFactorRequired: boolean): WhoIs {
  return async ({ cookie }) => {
    if (!cookie) return { standing: 'anyone' };
    const session = await auth.api.getSession({ headers: new Headers({ cookie }) });
    const found = session ? await findActor(db, session.user.id) : null;
    if (!found) return { standing: 'anyone' };
    if (found.state === 'suspended') return { standing: 'suspended' };
    const { accountId, role, name, email, siteIds, participantId } = found;
    const actor: AccountActor = {
      kind: 'account',
      accountId,
      role,
      name,
      email,
      language: 'en',
      siteIds,
      participantId,
    };
    if (secondFactorRequired && isStaffRole(role) && !found.secondFactor)
      return { standing: 'lacks_second_factor', actor };
    return { standing: 'known', actor };
  };
}
