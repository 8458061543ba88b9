// Accounts, memberships and invitations, and the sign-in library's rows as far as the house writes them itself.

import { and, count, desc, eq, inArray, isNull, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { account, authCredential, authSession, authUser, invitation, membership } from '@/db/schema/account';
import { caregiver, participant } from '@/db/schema/participant';
import { site } from '@/db/schema/site';
import type { Role } from '@/shared/values/roles';

export interface ActorRow {
  accountId: string;
  role: Role;
  name: string;
  email: string;
  state: 'active' | 'suspended' | 'closed';
  secondFactor: boolean;
  siteIds: string[];
  participantId: string | null;
}

const sitesOf = sql<
  string[]
>`coalesce((select array_agg(${membership.siteId}::text) from ${membership} where ${membership.accountId} = ${account.id}), '{}')`;

/** Everything about whoever is signed in that decides what they may reach. */
export async function findActor(db: Db, accountId: string): Promise<ActorRow | null> {
  const [row] = await db
    .select({
      accountId: account.id,
      role: account.role,
      name: account.name,
      email: account.email,
      state: account.state,
      secondFactor: authUser.twoFactorEnabled,
      siteIds: sitesOf,
      participantId: participant.id,
    })
    .from(account)
    .innerJoin(authUser, eq(authUser.id, account.id))
    .leftJoin(participant, eq(participant.accountId, account.id))
    .where(eq(account.id, accountId))
    .limit(1);
  return row ?? null;
}

export interface AccountRow {
  id: string;
  role: Role;
  name: string;
  email: string;
  language: string;
  state: 'active' | 'suspended' | 'closed';
  participantId: string | null;
  /** The first site of staff, or the participant's. */
  siteId: string | null;
}

const accountColumns = {
  id: account.id,
  role: account.role,
  name: account.name,
  email: account.email,
  language: account.language,
  state: account.state,
  participantId: participant.id,
  siteId: sql<
    string | null
  >`coalesce(${participant.siteId}, (select ${membership.siteId} from ${membership} where ${membership.accountId} = ${account.id} order by ${membership.createdAt} limit 1))`,
};

export async function findAccountByEmail(db: Db, email: string): Promise<AccountRow | null> {
  const [row] = await db
    .select(accountColumns)
    .from(account)
    .leftJoin(participant, eq(participant.accountId, account.id))
    .where(sql`lower(${account.email}) = lower(${email})`)
    .limit(1);
  return row ?? null;
}

export async function findAccount(db: Db, id: string): Promise<AccountRow | null> {
  const [row] = await db
    .select(accountColumns)
    .from(account)
    .leftJoin(participant, eq(participant.accountId, account.id))
    .where(eq(account.id, id))
    .limit(1);
  return row ?? null;
}

/** The hash of an account's password; null where there is none. */
export async function findPasswordHash(db: Db, accountId: string): Promise<string | null> {
  const [row] = await db
    .select({ hash: authCredential.password })
    .from(authCredential)
    .where(and(eq(authCredential.userId, accountId), eq(authCredential.providerId, 'credential')))
    .limit(1);
  return row?.hash ?? null;
}

export interface NewAccount {
  id: string;
  credentialId: string;
  role: Role;
  name: string;
  email: string;
  passwordHash: string;
  language: string;
  createdAt: string;
}

/** Adds the account with what the sign-in library needs beside it. Null when the address has an account already. */
export async function insertAccount(db: Db, row: NewAccount): Promise<{ id: string } | null> {
  // The address came by mail and the invitation proves that it can be read.
  const [user] = await db
    .insert(authUser)
    .values({ id: row.id, name: row.name, email: row.email, emailVerified: true })
    .onConflictDoNothing({ target: authUser.email })
    .returning({ id: authUser.id });
  if (!user) return null;
  await db.insert(authCredential).values({
    id: row.credentialId,
    accountId: row.id,
    providerId: 'credential',
    userId: row.id,
    password: row.passwordHash,
  });
  await db.insert(account).values({
    id: row.id,
    role: row.role,
    name: row.name,
    email: row.email,
    language: row.language,
    createdAt: row.createdAt,
  });
  return user;
}

/** Ends all sessions of an account; without `keepToken`, every one. */
export async function endSessions(db: Db, accountId: string): Promise<void> {
  await db.delete(authSession).where(eq(authSession.userId, accountId));
}

export async function insertMembership(db: Db, accountId: string, siteId: string, createdAt: string): Promise<void> {
  await db.insert(membership).values({ accountId, siteId, createdAt }).onConflictDoNothing();
}

export interface InvitationRow {
  id: string;
  role: Role;
  email: string;
  name: string;
  siteId: string;
  siteName: string;
  subjectId: string | null;
  expiresAt: string;
  closedAt: string | null;
  closedWhy: string | null;
}

const invitationColumns = {
  id: invitation.id,
  role: invitation.role,
  email: invitation.email,
  name: invitation.name,
  siteId: invitation.siteId,
  siteName: site.name,
  subjectId: invitation.subjectId,
  expiresAt: invitation.expiresAt,
  closedAt: invitation.closedAt,
  closedWhy: invitation.closedWhy,
};

export async function findInvitation(db: Db, tokenHash: string): Promise<InvitationRow | null> {
  const [row] = await db
    .select(invitationColumns)
    .from(invitation)
    .innerJoin(site, eq(site.id, invitation.siteId))
    .where(eq(invitation.tokenHash, tokenHash))
    .limit(1);
  return row ?? null;
}

/** The same, held until the transaction ends: of two who accept at once, the second sees that it was used. */
export async function lockInvitation(db: Db, tokenHash: string): Promise<InvitationRow | null> {
  const [row] = await db
    .select(invitationColumns)
    .from(invitation)
    .innerJoin(site, eq(site.id, invitation.siteId))
    .where(eq(invitation.tokenHash, tokenHash))
    .limit(1)
    .for('update', { of: invitation });
  return row ?? null;
}

export async function closeInvitation(
  db: Db,
  id: string,
  at: string,
  why: 'accepted' | 'replaced' | 'withdrawn',
): Promise<void> {
  await db
    .update(invitation)
    .set({ closedAt: at, closedWhy: why })
    .where(and(eq(invitation.id, id), isNull(invitation.closedAt)));
}

/** Ties a participant to the account that accepted. False when somebody else did first, or the person withdrew. */
export async function giveParticipantAccount(db: Db, participantId: string, accountId: string): Promise<boolean> {
  const rows = await db
    .update(participant)
    .set({ accountId })
    .where(and(eq(participant.id, participantId), isNull(participant.accountId), isNull(participant.closedAt)))
    .returning({ id: participant.id });
  return rows.length > 0;
}

/** Ties a caregiver's row to the account that accepted. False when it was removed or accepted meanwhile. */
export async function giveCaregiverAccount(
  db: Db,
  caregiverId: string,
  accountId: string,
  at: string,
): Promise<boolean> {
  const rows = await db
    .update(caregiver)
    .set({ accountId, acceptedAt: at })
    .where(and(eq(caregiver.id, caregiverId), isNull(caregiver.accountId), isNull(caregiver.closedAt)))
    .returning({ id: caregiver.id });
  return rows.length > 0;
}

export async function findCaregiverOfInvitation(
  db: Db,
  caregiverId: string,
): Promise<{ participantId: string; participantName: string; siteId: string; isOpen: boolean } | null> {
  const [row] = await db
    .select({
      participantId: participant.id,
      participantName: participant.name,
      siteId: participant.siteId,
      isOpen: sql<boolean>`${caregiver.closedAt} is null`,
    })
    .from(caregiver)
    .innerJoin(participant, eq(participant.id, caregiver.participantId))
    .where(eq(caregiver.id, caregiverId))
    .limit(1);
  return row ?? null;
}

export async function findCaregiverByStopToken(
  db: Db,
  stopTokenHash: string,
): Promise<{ id: string; participantId: string; mailsStoppedAt: string | null; isOpen: boolean } | null> {
  const [row] = await db
    .select({
      id: caregiver.id,
      participantId: caregiver.participantId,
      mailsStoppedAt: caregiver.mailsStoppedAt,
      isOpen: sql<boolean>`${caregiver.closedAt} is null`,
    })
    .from(caregiver)
    .where(eq(caregiver.stopTokenHash, stopTokenHash))
    .limit(1);
  return row ?? null;
}

export async function stopCaregiverMails(db: Db, caregiverId: string, at: string): Promise<boolean> {
  const rows = await db
    .update(caregiver)
    .set({ mailsStoppedAt: at })
    .where(and(eq(caregiver.id, caregiverId), isNull(caregiver.mailsStoppedAt), isNull(caregiver.closedAt)))
    .returning({ id: caregiver.id });
  return rows.length > 0;
}

/** Sites of the people whom a caregiver account is linked to. */
export async function listSiteIdsOfCaregiver(db: Db, accountId: string): Promise<string[]> {
  const rows = await db
    .selectDistinct({ siteId: participant.siteId })
    .from(caregiver)
    .innerJoin(participant, eq(participant.id, caregiver.participantId))
    .where(and(eq(caregiver.accountId, accountId), isNull(caregiver.closedAt)));
  return rows.map((row) => row.siteId);
}

export async function countAccounts(db: Db): Promise<number> {
  const [row] = await db.select({ rows: count() }).from(account);
  return row?.rows ?? 0;
}

export interface ListedAccount {
  id: string;
  email: string;
  name: string;
  role: Role;
  siteNames: string[];
  participantId: string | null;
}

/** All accounts with their sites (a caregiver's: those of the people they help), staff first. */
export async function listAccounts(db: Db, limit: number): Promise<ListedAccount[]> {
  const rows = await db
    .select({
      id: account.id,
      email: account.email,
      name: account.name,
      role: account.role,
      participantId: participant.id,
      ownSite: participant.siteId,
    })
    .from(account)
    .leftJoin(participant, eq(participant.accountId, account.id))
    .orderBy(desc(sql`${account.role} not in ('participant', 'caregiver')`), account.createdAt, account.email)
    .limit(limit);
  const memberships = await db
    .select({ accountId: membership.accountId, siteName: site.name })
    .from(membership)
    .innerJoin(site, eq(site.id, membership.siteId))
    .orderBy(site.name);
  const helped = await db
    .selectDistinct({ accountId: caregiver.accountId, siteName: site.name })
    .from(caregiver)
    .innerJoin(participant, eq(participant.id, caregiver.participantId))
    .innerJoin(site, eq(site.id, participant.siteId))
    .where(isNull(caregiver.closedAt))
    .orderBy(site.name);
  const ownSites = rows.flatMap((row) => (row.ownSite ? [row.ownSite] : []));
  const named =
    ownSites.length === 0
      ? []
      : await db.select({ id: site.id, name: site.name }).from(site).where(inArray(site.id, ownSites));
  const nameOf = new Map(named.map((row) => [row.id, row.name]));
  return rows.map(({ ownSite, ...row }) => ({
    ...row,
    siteNames: ownSite
      ? [nameOf.get(ownSite) ?? '']
      : [...memberships, ...helped].filter((one) => one.accountId === row.id).map((one) => one.siteName),
  }));
}

/** Participants who have not accepted their invitation yet, in the shape of accounts. */
export async function listInvitedParticipants(db: Db, limit: number): Promise<ListedAccount[]> {
  const rows = await db
    .select({ id: participant.id, email: participant.email, name: participant.name, siteName: site.name })
    .from(participant)
    .innerJoin(site, eq(site.id, participant.siteId))
    .where(and(isNull(participant.accountId), isNull(participant.closedAt)))
    .orderBy(participant.createdAt, participant.id)
    .limit(limit);
  return rows.map(({ siteName, ...row }) => ({
    ...row,
    role: 'participant' as const,
    siteNames: [siteName],
    participantId: row.id,
  }));
}
