// Consents as recorded. Append-only; closing one is withdrawal.

import { and, eq, isNull } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { consent } from '@/db/schema/participant';

export interface NewConsent {
  id: string;
  participantId: string;
  kind: 'own' | 'guardian' | 'assent';
  documentVersion: number;
  signedOn: string;
  answers: Readonly<Record<string, boolean | string>>;
  recordedBy: string;
  createdAt: string;
}

export async function insertConsent(db: Db, row: NewConsent): Promise<void> {
  await db.insert(consent).values({ ...row, documentVersion: String(row.documentVersion) });
}

/** All of a person's consents end. */
export async function closeConsents(db: Db, participantId: string, at: string): Promise<void> {
  await db
    .update(consent)
    .set({ closedAt: at, closedWhy: 'withdrawn' })
    .where(and(eq(consent.participantId, participantId), isNull(consent.closedAt)));
}
