// Invitations as they are made, and who already stands behind an address. Accepting one is db/queries/account.ts'.

import { and, eq, gt, isNull, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { account, invitation } from '@/db/schema/account';
import { participant } from '@/db/schema/participant';
import type { Role } from '@/shared/values/roles';

/** Two who invite the same address take turns, so that both see what the first one wrote; released at commit. */
export async function lockAddress(db: Db, email: string): Promise<void> {
  await db.execute(sql`select pg_advisory_xact_lock(hashtext('rampwell.address'), hashtext(lower(${email})))`);
}

/** Who stands behind an address: an account's role, or `participant` for one enrolled who has no account yet; null = nobody. */
export async function findRoleOfAddress(db: Db, email: string): Promise<Role | null> {
  const [known] = await db
    .select({ role: account.role })
    .from(account)
    .where(sql`lower(${account.email}) = lower(${email})`)
    .limit(1);
  if (known) return known.role;
  const [enrolled] = await db
    .select({ id: participant.id })
    .from(participant)
    .where(and(sql`lower(${participant.email}) = lower(${email})`, isNull(participant.closedAt)))
    .limit(1);
  return enrolled ? 'participant' : null;
}

/** True while a member of staff is invited under this address and the link still works. */
export async function isStaffInvited(db: Db, email: string, now: string): Promise<boolean> {
  const [row] = await db
    .select({ id: invitation.id })
    .from(invitation)
    .where(
      and(
        eq(invitation.email, email),
        isNull(invitation.closedAt),
        gt(invitation.expiresAt, now),
        sql`${invitation.role} not in ('participant', 'caregiver')`,
      ),
    )
    .limit(1);
  return row !== undefined;
}

export interface NewInvitation {
  id: string;
  role: Role;
  email: string;
  name: string;
  siteId: string;
  /** The participant or the caregiver's row; null for staff. */
  subjectId: string | null;
  tokenHash: string;
  invitedBy: string;
  createdAt: string;
  expiresAt: string;
}

export async function insertInvitation(db: Db, row: NewInvitation): Promise<void> {
  await db.insert(invitation).values(row);
}

/** The old links of a participant or caregiver end. */
export async function closeInvitationsOf(
  db: Db,
  subjectId: string,
  at: string,
  why: 'replaced' | 'withdrawn',
): Promise<void> {
  await db
    .update(invitation)
    .set({ closedAt: at, closedWhy: why })
    .where(and(eq(invitation.subjectId, subjectId), isNull(invitation.closedAt)));
}
