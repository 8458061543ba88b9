// A permit as its holder sees it, with its state at this instant.

import { findNumber } from '@/db/queries/clearance/history';
import type { PermitRecord } from '@/db/queries/permit';
import type { Db } from '@/db/client';
import type { PermitView } from '@/shared/contracts/permit';
import { permitStateAt } from '@/shared/rules/permit-state';
import { permitExpiryCauses } from '@/shared/values/codes';

export async function viewPermit(db: Db, permit: PermitRecord, now: string): Promise<PermitView> {
  const { number, of } = await findNumber(db, permit.courseId, permit.plannedSessionId);
  return {
    id: permit.id,
    sessionId: permit.sessionId,
    courseId: permit.courseId,
    participantId: permit.participantId,
    deviceId: permit.deviceId,
    prescriptionVersion: permit.prescriptionVersion,
    ...permitStateAt(permit, now),
    issuedAt: permit.issuedAt,
    expiresAt: permit.expiresAt,
    expiresBy: permitExpiryCauses.find((cause) => cause === permit.expiresBy) ?? 'issue',
    counter: permit.counter,
    token: permit.token,
    dose: permit.dose,
    sessionNumber: number,
    sessionsTotal: Math.max(permit.sessionsTotal, of),
  };
}
