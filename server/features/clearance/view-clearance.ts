// The answer of clearance as people see it: what is in the way with its sentence, what comes next, what is due. Decides nothing itself.

import type { ClearanceRecord } from '@/db/queries/clearance';
import { doseOf } from '@/db/queries/dose';
import type { AnswerOf } from '@/shared/contracts/contract';
import type { readClearance } from '@/shared/contracts/clearance';
import { precheckView } from '@/shared/rules/precheck-view';
import { ageYearsOn } from '@/shared/rules/age';
import { ceilings } from '@/shared/rules/ceilings';
import { clearance, earliestStart, passesByTime } from '@/shared/rules/clearance';
import { gatherFacts } from '@/shared/rules/clearance/gather';
import { isNotAskedYet, isStartStep, nextPlanned, withPlan } from '@/shared/rules/clearance/planned';
import { isNextDayDue } from '@/shared/rules/next-day';
import { localDate, parseInstant } from '@/shared/values/zone';
import type { Tx } from '@/server/action';

/** Under 18, or of unknown age: a helper is asked for. */
function isMinor(person: ClearanceRecord['person'], now: string): boolean {
  const { bornOn, zone } = person.participant;
  const age = ageYearsOn(bornOn, localDate(parseInstant(now) ?? Number.NaN, zone));
  return age === undefined || age < ceilings.adultAgeYears.value;
}

function openSessions({ sessions, person }: ClearanceRecord, now: string) {
  const open = sessions.find(({ closedAt }) => closedAt === null);
  const begunAndOver = sessions.filter(
    ({ startedAt, endedAt, closedWhy }) => startedAt !== null && endedAt !== null && closedWhy !== 'unused',
  );
  const { zone } = person.participant;
  const permit = person.openPermit;
  return {
    livePermitId: permit !== null && permit.expiresAt > now ? permit.id : null,
    openSessionId: open?.id ?? null,
    diaryDueSessionId: begunAndOver.find(({ hasDiary }) => !hasDiary)?.id ?? null,
    nextDayDueSessionId:
      begunAndOver.find((each) => each.hasDiary && !each.hasNextDay && isNextDayDue(each.endedAt, now, zone))?.id ??
      null,
  };
}

export async function viewClearance(
  tx: Tx,
  gathered: ClearanceRecord,
  now: string,
): Promise<AnswerOf<typeof readClearance>> {
  const { person, planned, protocol } = gathered;
  const { participant, site, course, prescription } = person;
  const answer = withPlan(clearance(gatherFacts(gathered, now), now), planned, now);
  // The battery is told when the device is at hand; asking for it now would refuse everybody.
  const reasons = answer.reasons.filter((reason) => !isNotAskedYet(reason));
  const inTheWay = reasons.filter((reason) => !isStartStep(reason));
  const next = nextPlanned(planned, now);
  const isInForce = prescription !== null && prescription.signedAt !== null && prescription.closedAt === null;
  const isUnread = isInForce && (prescription.version ?? 0) > person.acknowledgedVersion;
  const assisted = isInForce && prescription.assisted;
  return {
    participantId: participant.id,
    courseId: course?.id ?? null,
    asOf: now,
    zone: participant.zone,
    allowed: reasons.length === 0,
    readyForPrecheck: inTheWay.length === 0,
    reasons: await tx.explain(reasons, participant.id),
    earliestStartAt: passesByTime(inTheWay) ? earliestStart(inTheWay) : null,
    nextSession:
      next === undefined || !isInForce
        ? null
        : {
            plannedSessionId: next.id,
            number: planned.indexOf(next) + 1,
            of: Math.max(prescription.sessionsTotal, planned.length),
            windowFrom: next.windowFrom,
            windowTo: next.windowTo,
          },
    dose: isInForce ? doseOf(prescription) : null,
    assisted,
    precheckFacts: {
      excludesPregnancy: protocol?.settings.excludesPregnancy ?? true,
      helperAsked: assisted || isMinor(person, now),
    },
    precheck: person.precheck === null ? null : precheckView(person.precheck),
    ...openSessions(gathered, now),
    prescriptionToAcknowledgeId: isUnread ? prescription.id : null,
    acknowledgedVersion: person.acknowledgedVersion,
    site: {
      id: site.id,
      name: site.name,
      code: site.code,
      phone: site.phone,
      emergencyNumber: site.emergencyNumber,
      zone: site.zone,
    },
  };
}
