// Screening forms as recorded, append-only; the newest counts.

import type { Db } from '@/db/client';
import { screening } from '@/db/schema/participant';

export interface NewScreening {
  id: string;
  participantId: string;
  answers: Readonly<Record<string, { answer: 'yes' | 'no' | 'not_known'; reason?: string | undefined }>>;
  seizureHistory: boolean;
  outcome: 'clear' | 'excluded' | 'incomplete';
  validUntil: string;
  recordedBy: string;
  createdAt: string;
}

export async function insertScreening(db: Db, row: NewScreening): Promise<void> {
  await db.insert(screening).values(row);
}
