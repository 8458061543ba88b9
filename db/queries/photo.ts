// Skin photos, kept as rows: one backup, one transaction. Their bytes leave by findPhoto alone.

import { and, desc, eq, inArray, isNull, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { consent } from '@/db/schema/participant';
import { photo } from '@/db/schema/session';

export interface NewPhoto {
  id: string;
  sessionId: string;
  participantId: string;
  jpeg: Uint8Array;
  width: number;
  height: number;
  createdAt: string;
  accountId: string;
}

export async function insertPhoto(db: Db, row: NewPhoto): Promise<void> {
  await db.insert(photo).values(row);
}

export async function countPhotos(db: Db, sessionId: string): Promise<number> {
  const [row] = await db
    .select({ count: sql<number>`count(*)::int` })
    .from(photo)
    .where(eq(photo.sessionId, sessionId));
  return row?.count ?? 0;
}

/** Whose photo it is. */
export async function findPhotoOwner(
  db: Db,
  photoId: string,
): Promise<{ participantId: string; sessionId: string } | null> {
  const [row] = await db
    .select({ participantId: photo.participantId, sessionId: photo.sessionId })
    .from(photo)
    .where(eq(photo.id, photoId))
    .limit(1);
  return row ?? null;
}

export async function findPhotoBytes(db: Db, photoId: string): Promise<Uint8Array | null> {
  const [row] = await db.select({ jpeg: photo.jpeg }).from(photo).where(eq(photo.id, photoId)).limit(1);
  return row?.jpeg ?? null;
}

/** Whether the consent that counts now, one's own or a guardian's, agrees to photos; false without one. */
export async function findPhotoConsent(db: Db, participantId: string): Promise<boolean> {
  const [row] = await db
    .select({ agrees: sql<boolean>`coalesce(answers ->> 'agreesToPhotos' = 'true', false)` })
    .from(consent)
    .where(
      and(
        eq(consent.participantId, participantId),
        inArray(consent.kind, ['own', 'guardian']),
        isNull(consent.closedAt),
      ),
    )
    .orderBy(desc(consent.createdAt), desc(consent.id))
    .limit(1);
  return row?.agrees ?? false;
}
