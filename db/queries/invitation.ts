// Invitations as they are made, and who already stands behind an address. Accepting one is db/queries/account.ts'.

import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { invitation } from '@/db/schema/account';
import { roles, type Role } from '@/shared/values/roles';

/** Two who invite the same address take turns, so that both see what the first one wrote; released at commit. */
export async function lockAddress(db: Db, email: string): Promise<void> {
  await db.execute(sql`select pg_advisory_xact_lock(hashtext('rampwell.address'), hashtext(lower(${email})))`);
}

/**
 * Who stands behind an address: an account's role, or `participant` for one enrolled who has no account yet; null = nobody. Asked of the
 * whole house by a function of the database: the asker's own scope ends at the site.
 */
export async function findRoleOfAddress(db: Db, email: string): Promise<Role | null> {
  const { rows } = await db.execute<{ role: string | null }>(sql`select role_of_address(${email}) as role`);
  return roles.find((role) => role === rows[0]?.role) ?? null;
}

/** True while a member of staff is invited under this address and the link still works. Of the whole house, too. */
export async function isStaffInvited(db: Db, email: string, now: string): Promise<boolean> {
  const { rows } = await db.execute<{ invited: boolean }>(
    sql`select is_staff_invited(${email}, ${now}::timestamptz) as invited`,
  );
  return rows[0]?.invited === true;
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
