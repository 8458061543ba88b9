// Answers to a pre-check: stored with what the rule makes of them. A hold found is stored too, and no later answer clears it.

import { findActiveCourse, lockCourse } from '@/db/queries/course-state';
import { loadClearanceFacts } from '@/db/queries/clearance';
import { listOpenLockouts, storeConsequences } from '@/db/queries/lockout';
import { insertPrecheck } from '@/db/queries/precheck';
import { action, notFound, refuse } from '@/server/action';
import { findHelper } from '@/server/features/precheck/find-helper';
import { answerPrecheck as contract } from '@/shared/contracts/clearance';
import { consequencesOf, firstPages } from '@/shared/rules/consequences';
import { judgePrecheck } from '@/shared/rules/precheck';
import { findingsOfPrecheck } from '@/shared/rules/precheck-findings';
import { precheckView } from '@/shared/rules/precheck-view';

export const answerPrecheck = action(contract, async ({ actor, body }, tx) => {
  const { participantId } = actor;
  if (participantId === null) return notFound();
  const active = await findActiveCourse(tx.db, participantId);
  const course = active && (await lockCourse(tx.db, active.id));
  if (!course || course.closedAt !== null) return refuse('course.none', { participantId });
  const helper = body.helperCode === undefined ? null : await findHelper(tx.db, participantId, body.helperCode);
  if (helper === 'wrong') return refuse('precheck.helper_code_wrong', { participantId });
  const now = await tx.now();
  const gathered = await loadClearanceFacts(tx.db, participantId, now);
  if (gathered === null) return notFound();
  const { person, protocol } = gathered;

  const judged = judgePrecheck(
    body.answers,
    {
      waveform: person.prescription?.waveform,
      hasSeizureHistory: person.screening?.seizureHistory,
      excludesPregnancy: protocol?.settings.excludesPregnancy,
      zone: person.participant.zone,
    },
    now,
  );
  const id = crypto.randomUUID();
  const { siteId } = person.participant;
  const consequences = consequencesOf(
    findingsOfPrecheck(judged, id),
    { participantId, siteId, source: 'precheck', sourceId: id, sessionId: null, at: now },
    await listOpenLockouts(tx.db, participantId, now),
    () => crypto.randomUUID(),
  );

  const row = {
    id,
    participantId,
    courseId: course.id,
    accountId: actor.accountId,
    answers: body.answers,
    language: body.language,
    complete: judged.complete,
    open: judged.open,
    outcome: judged.outcome,
    findings: judged.findings,
    emergencyAdvice: judged.emergencyAdvice,
    // Only a helper's own code says that somebody is there.
    helperPresent: helper !== null,
    helperAccountId: helper?.accountId ?? null,
    answeredAt: now,
  };
  await insertPrecheck(tx.db, row);
  await storeConsequences(tx.db, consequences, participantId, now);
  const pages = firstPages(consequences, protocol?.settings.contacts ?? [], {
    siteName: person.site.name,
    code: person.participant.code,
  });
  for (const page of pages) tx.tell(page);
  const { outcome, complete } = judged;
  const lockouts = consequences.lockouts.map(({ level, code }) => ({ level, code }));
  tx.record({ participantId, siteId, subject: { kind: 'precheck', id }, after: { complete, outcome, lockouts } });
  return precheckView(row);
});
