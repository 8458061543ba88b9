// Asks the rules about a prescription's content, at its writing and again at its signing: dose by the limits in force now,
// montage, schedule. Decides nothing itself and writes nothing.

import type { Db } from '@/db/client';
import { listPlannedRows } from '@/db/queries/course-plan';
import type { PrescriptionContent } from '@/db/queries/prescription';
import { readProtocolInForce } from '@/db/queries/protocol';
import type { ParticipantRecord } from '@/db/queries/reach';
import { refuse, type Refusal } from '@/server/action';
import { ageYearsOn } from '@/shared/rules/age';
import { doseFactsOf, judgeDose, minutesOn, type DoseJudgement } from '@/shared/rules/dose';
import { overLimitFields } from '@/shared/rules/prescription-fields';
import { montageFindings, scheduleFindings, type ScheduleFinding } from '@/shared/rules/prescription-schedule';
import type { SiteLimits } from '@/shared/values/protocol-settings';
import { localDate, parseInstant } from '@/shared/values/zone';

/** The site's limits in force; undefined while it has signed none, and then the shipped rows hold. */
export async function limitsInForce(db: Db, siteId: string): Promise<SiteLimits | undefined> {
  return (await readProtocolInForce(db, siteId))?.settings.limits;
}

export function judgeFor(
  content: Pick<PrescriptionContent, 'dose' | 'schedule'>,
  participant: ParticipantRecord,
  limits: SiteLimits | undefined,
  now: string,
): DoseJudgement {
  const { dose, schedule } = content;
  const age = ageYearsOn(participant.bornOn, localDate(parseInstant(now) ?? Number.NaN, participant.zone));
  return judgeDose(
    doseFactsOf({ ...dose, sessionsPerDay: schedule.maxPerDay, minGapHours: schedule.minGapHours }),
    age,
    limits,
  );
}

/** Local days of a course that have a session already, done or under way. */
export async function listTakenDays(db: Db, courseId: string | null, zone: string): Promise<string[]> {
  if (courseId === null) return [];
  const rows = await listPlannedRows(db, courseId);
  return rows
    .filter(({ state }) => state === 'done' || state === 'running')
    .map(({ windowFrom }) => localDate(parseInstant(windowFrom) ?? Number.NaN, zone));
}

export interface JudgedContent {
  judgement: DoseJudgement;
  findings: ScheduleFinding[];
  takenDays: string[];
}

export async function judgeContent(
  db: Db,
  facts: {
    content: PrescriptionContent;
    participant: ParticipantRecord;
    courseId: string | null;
    mayHaveBegun: boolean;
    now: string;
  },
): Promise<JudgedContent> {
  const { content, participant, courseId, mayHaveBegun, now } = facts;
  const limits = await limitsInForce(db, participant.siteId);
  const takenDays = await listTakenDays(db, courseId, participant.zone);
  const context = { zone: participant.zone, sessionMinutes: minutesOn(content.dose), takenDays, mayHaveBegun };
  return {
    judgement: judgeFor(content, participant, limits, now),
    findings: [...montageFindings(content.dose), ...scheduleFindings(content.schedule, context, now)],
    takenDays,
  };
}

/** The refusal that a judged content deserves; null if it may stand. */
export function refusalOf(
  judged: JudgedContent,
  content: PrescriptionContent,
  participant: ParticipantRecord,
): Refusal | null {
  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (judged.judgement.verdict === 'refuse') {
    return refuse('prescription.over_limit', { ...whose, fields: overLimitFields(judged.judgement, content.dose) });
  }
  if (judged.findings.length > 0) return refuse('prescription.schedule', { ...whose, fields: judged.findings });
  return null;
}
