// Prescriptions as their readers see them: content, the limits that it uses as they stand now, signatures, acknowledgement.
// A participant sees signed versions; a pseudonymous reader no person's own words. Changes nothing.

import { isIntact, prescriptionHashOf } from '@/db/queries/content-hash';
import type { Db } from '@/db/client';
import { countLivePermits, listAcknowledgements, type PrescriptionRecord } from '@/db/queries/prescription';
import type { ParticipantRecord } from '@/db/queries/reach';
import { listSignatures, type SignatureRecord } from '@/db/queries/signature';
import { judgeFor, limitsInForce } from '@/server/features/prescription/judge-content';
import type { LimitRow, PrescriptionView } from '@/shared/contracts/prescription';
import { densityOf, type DoseRow } from '@/shared/rules/dose';
import type { Role } from '@/shared/values/roles';

export function mayRead(record: PrescriptionRecord, role: Role): boolean {
  return role !== 'participant' || record.signedAt !== null;
}

function statusOf(record: PrescriptionRecord, signatures: readonly SignatureRecord[]): PrescriptionView['status'] {
  if (record.closedWhy === 'discarded') return 'discarded';
  if (record.closedWhy === 'superseded') return 'superseded';
  if (record.signedAt !== null) return 'signed';
  return signatures.length > 0 ? 'awaiting_second_signature' : 'draft';
}

function limitRowOf(row: DoseRow): LimitRow {
  return {
    row: row.quantity,
    value: row.value ?? null,
    unit: row.unit,
    tier: row.tier,
    routineLimit: row.routineLimit ?? null,
    siteLimit: row.siteLimit ?? null,
    ceiling: row.ceiling ?? null,
    layer: row.layer ?? null,
    source: row.source,
    fact: row.fact ?? null,
  };
}

export async function viewPrescriptions(
  db: Db,
  participant: ParticipantRecord,
  records: readonly PrescriptionRecord[],
  role: Role,
  now: string,
): Promise<PrescriptionView[]> {
  const ids = records.map(({ id }) => id);
  const limits = await limitsInForce(db, participant.siteId);
  const signatures = await listSignatures(db, ids);
  const acknowledged = await listAcknowledgements(db, ids);
  const livePermits = await countLivePermits(db, participant.id, now);
  return records.map((record): PrescriptionView => {
    const signed = signatures.get(record.id) ?? [];
    const judgement = judgeFor(record, participant, limits, now);
    const { dose } = record;
    const contentHash = prescriptionHashOf(record);
    return {
      id: record.id,
      courseId: record.courseId,
      participantId: record.participantId,
      version: record.version,
      status: statusOf(record, signed),
      dose,
      schedule: record.schedule,
      assisted: record.assisted,
      reason: role === 'monitor' ? null : record.reason,
      amendsId: record.amendsId,
      computed: {
        chargeCoulomb: record.chargeCoulomb,
        minutes: record.minutes,
        maxDensityMilliampPerSquareCentimetre: Math.max(
          ...dose.electrodes.map(({ share, areaSquareCentimetre }) =>
            densityOf(dose.intensityMilliamp * share, areaSquareCentimetre),
          ),
        ),
      },
      verdict: judgement.verdict,
      rows: judgement.rows.map(limitRowOf),
      signatures: signed.map(({ name, role: signedAs, meaning, at, contentHash }) => ({
        name,
        role: signedAs,
        meaning,
        at,
        contentHash,
      })),
      // Computed anew: a signature over another content shows as one.
      contentHash,
      isIntact: isIntact(
        record.signedAt !== null,
        contentHash,
        record.contentHash,
        signed.map((each) => each.contentHash),
      ),
      createdAt: record.createdAt,
      signedAt: record.signedAt,
      acknowledgedAt: acknowledged.get(record.id) ?? null,
      livePermits,
    };
  });
}

export async function viewPrescription(
  db: Db,
  participant: ParticipantRecord,
  record: PrescriptionRecord,
  role: Role,
  now: string,
): Promise<PrescriptionView> {
  const [view] = await viewPrescriptions(db, participant, [record], role, now);
  if (!view) throw new Error('one record gives one view');
  return view;
}
