// Sites and their staff. Who may see which is the caller's reach, given as site ids.

import { and, asc, eq, gt, inArray, isNull, sql, type SQL } from 'drizzle-orm';
import { unionAll } from 'drizzle-orm/pg-core';
import type { Db } from '@/db/client';
import { account, authUser, invitation, membership } from '@/db/schema/account';
import { site } from '@/db/schema/site';
import { staffRoles, type StaffRole } from '@/shared/values/roles';

export type SiteRecord = typeof site.$inferSelect;

/** A page of these sites by name. */
export async function listSites(
  db: Db,
  siteIds: readonly string[],
  page: { limit: number; after: { name: string; id: string } | null },
): Promise<SiteRecord[]> {
  if (siteIds.length === 0) return [];
  const after = page.after && sql`(${site.name}, ${site.id}) > (${page.after.name}, ${page.after.id}::uuid)`;
  return db
    .select()
    .from(site)
    .where(and(inArray(site.id, [...siteIds]), after ?? undefined))
    .orderBy(asc(site.name), asc(site.id))
    .limit(page.limit);
}

export async function findSite(db: Db, siteId: string): Promise<SiteRecord | null> {
  const [row] = await db.select().from(site).where(eq(site.id, siteId)).limit(1);
  return row ?? null;
}

/** False when the code is another site's. */
export async function insertSite(db: Db, row: SiteRecord): Promise<boolean> {
  const made = await db.insert(site).values(row).onConflictDoNothing({ target: site.code }).returning({ id: site.id });
  return made.length > 0;
}

export interface StaffRecord {
  /** Sort key beside the name: the account's id, or the invitation's. */
  key: string;
  accountId: string | null;
  invitationId: string | null;
  name: string;
  email: string;
  role: StaffRole;
  siteIds: string[];
  state: 'invited' | 'active' | 'suspended';
  secondFactor: boolean;
  since: string;
}

function isAtOneOf(siteIds: readonly string[]) {
  return and(eq(membership.accountId, account.id), inArray(membership.siteId, [...siteIds]));
}

function staffWithAccount(db: Db, siteIds: readonly string[], only: SQL | undefined) {
  return db
    .select({
      key: sql<string>`${account.id}`.as('staff_key'),
      accountId: sql<string | null>`${account.id}`.as('staff_account'),
      invitationId: sql<string | null>`null::uuid`.as('staff_invitation'),
      name: sql<string>`${account.name}`.as('staff_name'),
      email: sql<string>`${account.email}`.as('staff_email'),
      role: sql<string>`${account.role}`.as('staff_role'),
      siteIds: sql<string[]>`array_agg(${membership.siteId}::text order by ${membership.siteId})`.as('staff_sites'),
      state: sql<string>`${account.state}`.as('staff_state'),
      secondFactor: sql<boolean>`${authUser.twoFactorEnabled}`.as('staff_second_factor'),
      since: sql<string>`${account.createdAt}`.mapWith(account.createdAt).as('staff_since'),
    })
    .from(account)
    .innerJoin(authUser, eq(authUser.id, account.id))
    .innerJoin(membership, isAtOneOf(siteIds))
    .where(and(inArray(account.role, [...staffRoles]), sql`${account.state} <> 'closed'`, only))
    .groupBy(account.id, authUser.twoFactorEnabled);
}

function staffInvited(db: Db, siteIds: readonly string[], now: string) {
  return db
    .select({
      key: sql<string>`${invitation.id}::text`.as('staff_key'),
      accountId: sql<string | null>`null::text`.as('staff_account'),
      invitationId: sql<string | null>`${invitation.id}`.as('staff_invitation'),
      name: sql<string>`${invitation.name}`.as('staff_name'),
      email: sql<string>`${invitation.email}`.as('staff_email'),
      role: sql<string>`${invitation.role}`.as('staff_role'),
      siteIds: sql<string[]>`array[${invitation.siteId}::text]`.as('staff_sites'),
      state: sql<string>`'invited'`.as('staff_state'),
      secondFactor: sql<boolean>`false`.as('staff_second_factor'),
      since: sql<string>`${invitation.createdAt}`.mapWith(invitation.createdAt).as('staff_since'),
    })
    .from(invitation)
    .where(
      and(
        inArray(invitation.siteId, [...siteIds]),
        inArray(invitation.role, [...staffRoles]),
        isNull(invitation.closedAt),
        gt(invitation.expiresAt, now),
      ),
    );
}

const staffStates = ['invited', 'active', 'suspended'] as const;

interface StaffRow extends Omit<StaffRecord, 'role' | 'state'> {
  role: string;
  state: string;
}

function staffOf(row: StaffRow): StaffRecord[] {
  const role = staffRoles.find((known) => known === row.role);
  const state = staffStates.find((known) => known === row.state);
  return role && state ? [{ ...row, role, state }] : [];
}

/** Staff of these sites and who is invited to them, by name. `siteIds` of each are those asked for alone. */
export async function listStaff(
  db: Db,
  siteIds: readonly string[],
  now: string,
  page: { limit: number; after: { name: string; key: string } | null },
): Promise<StaffRecord[]> {
  if (siteIds.length === 0) return [];
  const all = unionAll(staffWithAccount(db, siteIds, undefined), staffInvited(db, siteIds, now)).as('staff');
  const rows = await db
    .select()
    .from(all)
    .where(page.after ? sql`(${all.name}, ${all.key}) > (${page.after.name}, ${page.after.key})` : undefined)
    .orderBy(asc(all.name), asc(all.key))
    .limit(page.limit);
  return rows.flatMap(staffOf);
}

/** A member of staff of one of these sites, held against simultaneous change; null for anybody else. */
export async function lockStaff(db: Db, siteIds: readonly string[], accountId: string): Promise<StaffRecord | null> {
  if (siteIds.length === 0) return null;
  await db.select({ id: account.id }).from(account).where(eq(account.id, accountId)).for('update');
  const [row] = await staffWithAccount(db, siteIds, eq(account.id, accountId));
  return row ? (staffOf(row)[0] ?? null) : null;
}

export async function setAccountState(
  db: Db,
  accountId: string,
  state: 'active' | 'suspended' | 'closed',
): Promise<void> {
  await db.update(account).set({ state }).where(eq(account.id, accountId));
}
