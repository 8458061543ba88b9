// A clinician signs, the password checked again by the house. Limits and schedule are judged once more by what holds now;
// with its last needed signature the version is in force.

import { prescriptionHashOf } from '@/db/queries/content-hash';
import { lockCourse } from '@/db/queries/course-state';
import { findPrescription, findPrescriptionInForce } from '@/db/queries/prescription';
import { lockParticipantInReach } from '@/db/queries/reach';
import { insertSignature, listSignatures } from '@/db/queries/signature';
import { action, confirmedOf, notFound, refuse } from '@/server/action';
import { askSecondSignature } from '@/server/features/prescription/ask-second-signature';
import { judgeContent, refusalOf } from '@/server/features/prescription/judge-content';
import { putInForce } from '@/server/features/prescription/put-in-force';
import { viewPrescription } from '@/server/features/prescription/view-prescription';
import { signPrescription as contract } from '@/shared/contracts/prescription';
import { worstTier } from '@/shared/rules/dose';
import { signing } from '@/shared/rules/prescription-signing';

export const signPrescription = action(contract, async ({ actor, params, body, confirmedAt }, tx) => {
  const found = await findPrescription(tx.db, params.prescriptionId);
  const participant = found && (await lockParticipantInReach(tx.db, actor, found.participantId));
  const course = found && participant && (await lockCourse(tx.db, found.courseId));
  // Read again: another signature may have come in while the locks were waited for.
  const draft = course && (await findPrescription(tx.db, params.prescriptionId));
  if (!participant || !draft) return notFound();
  const now = await tx.now();

  const inForce = await findPrescriptionInForce(tx.db, course.id);
  const judged = await judgeContent(tx.db, {
    content: draft,
    participant,
    courseId: course.id,
    mayHaveBegun: true,
    now,
  });
  const answer = signing(
    {
      isSigned: draft.signedAt !== null,
      isClosed: draft.closedAt !== null,
      amendsId: draft.amendsId,
      inForceId: inForce?.id ?? null,
      isParticipantWithdrawn: participant.closedAt !== null,
      isCourseClosed: course.closedAt !== null,
      isSameContent: body.contentHash === draft.contentHash && draft.contentHash === prescriptionHashOf(draft),
      tier: worstTier([draft.tier, judged.judgement.verdict]),
      signatures: (await listSignatures(tx.db, [draft.id])).get(draft.id) ?? [],
    },
    actor.accountId,
    body.meaning,
  );
  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (!answer.allowed) return refuse(answer.code, whose);
  const refusal = refusalOf(judged, draft, participant);
  if (refusal) return refusal;

  const { accountId, name, role } = actor;
  const signed = {
    id: crypto.randomUUID(),
    accountId,
    name,
    role,
    meaning: body.meaning,
    contentHash: draft.contentHash,
    createdAt: now,
    confirmedAt: confirmedOf(confirmedAt),
  };
  await insertSignature(tx.db, { ...signed, subjectKind: 'prescription', subjectId: draft.id });
  const effect = answer.takesEffect ? await putInForce(tx, participant, draft, inForce, judged.takenDays, now) : null;
  if (!effect) await askSecondSignature(tx, participant, draft, accountId, now);

  const after = (await findPrescription(tx.db, draft.id)) ?? draft;
  tx.record({
    ...whose,
    subject: { kind: 'prescription', id: draft.id },
    before: { versionInForce: inForce?.version ?? null },
    after: { meaning: body.meaning, contentHash: draft.contentHash, version: after.version, ...(effect ?? {}) },
    why: draft.reason ?? undefined,
  });
  return viewPrescription(tx.db, participant, after, role, now);
});
