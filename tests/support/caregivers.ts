// What: caregivers who have accepted, straight into the database. How one comes about is tested where it is made.
// Must not: say what is right; tests do.
import { randomUUID } from 'node:crypto';
import { giveCaregiverAccount } from '@/db/queries/account';
import { insertCaregiver, insertShares } from '@/db/queries/caregiver';
import type { AccountActor } from '@/server/action';
import { hashOfMailToken } from '@/server/invitation';
import type { Clinic, Patient } from './clinic';

export interface Caregiver extends AccountActor {
  caregiverId: string;
  /** As it stands in the "stop these mails" link. */
  stopToken: string;
}

/** Shares adherence, and is told of missed sessions unless said otherwise. */
export async function acceptCaregiver(
  clinic: Clinic,
  patient: Patient,
  name: string,
  missedMail = true,
): Promise<Caregiver> {
  const { db } = clinic.client;
  const actor = await clinic.staff(name, 'caregiver');
  const id = randomUUID();
  const createdAt = await clinic.now();
  let stopToken = '';
  await clinic.transact.note(actor, 'test.stop-token', null, (tx) => {
    stopToken = tx.stopTokenFor(id);
  });
  const { participantId } = patient;
  await insertCaregiver(db, {
    id,
    participantId,
    name,
    email: actor.email,
    createdAt,
    stopTokenHash: hashOfMailToken(stopToken),
  });
  await insertShares(db, { id: randomUUID(), caregiverId: id, adherence: true, diary: false, missedMail, createdAt });
  await giveCaregiverAccount(db, id, actor.accountId, createdAt);
  return { ...actor, caregiverId: id, stopToken };
}
