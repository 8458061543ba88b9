// Signatures: who signed what, when, with which meaning, over which content. Added, never changed; valid for the content whose
// hash they carry and for no other.

import { and, asc, eq, inArray } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { account, membership } from '@/db/schema/account';
import { signature } from '@/db/schema/course';

export type SignatureMeaning = 'prescribed' | 'second_signature' | 'reviewed' | 'graded' | 'protocol';

export interface SignatureRecord {
  subjectId: string;
  accountId: string;
  name: string;
  role: string;
  meaning: SignatureMeaning;
  at: string;
  contentHash: string;
}

export interface NewSignature {
  id: string;
  subjectKind: 'prescription' | 'review' | 'protocol';
  subjectId: string;
  accountId: string;
  /** Printed name at the time of signing (21 CFR 11.50). */
  name: string;
  role: string;
  meaning: SignatureMeaning;
  contentHash: string;
  createdAt: string;
  /** When the house checked the password for this very signature. */
  confirmedAt: string;
}

/** False when this meaning, or for a prescription this person, has signed already. */
export async function insertSignature(db: Db, row: NewSignature): Promise<boolean> {
  const made = await db.insert(signature).values(row).onConflictDoNothing().returning({ id: signature.id });
  return made.length > 0;
}

/** Signatures of several subjects, first signed first. */
export async function listSignatures(db: Db, subjectIds: readonly string[]): Promise<Map<string, SignatureRecord[]>> {
  const found = new Map<string, SignatureRecord[]>();
  if (subjectIds.length === 0) return found;
  const rows = await db
    .select({
      subjectId: signature.subjectId,
      accountId: signature.accountId,
      name: signature.name,
      role: signature.role,
      meaning: signature.meaning,
      at: signature.createdAt,
      contentHash: signature.contentHash,
    })
    .from(signature)
    .where(inArray(signature.subjectId, [...subjectIds]))
    .orderBy(asc(signature.createdAt), asc(signature.id));
  for (const row of rows) found.set(row.subjectId, [...(found.get(row.subjectId) ?? []), row]);
  return found;
}

/** Active clinicians of a site, by name: whose signature counts there. */
export async function listSigners(
  db: Db,
  siteId: string,
): Promise<{ accountId: string; name: string; email: string; language: string }[]> {
  return db
    .select({ accountId: account.id, name: account.name, email: account.email, language: account.language })
    .from(account)
    .innerJoin(membership, eq(membership.accountId, account.id))
    .where(and(eq(membership.siteId, siteId), eq(account.role, 'clinician'), eq(account.state, 'active')))
    .orderBy(asc(account.name), asc(account.id));
}
