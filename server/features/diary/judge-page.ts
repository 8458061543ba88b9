// What a diary page leads to by the rules, with the reports of the sessions before it. Loads and asks; writes nothing.

import type { Db } from '@/db/client';
import { listEarlierReports, type DiaryRecord } from '@/db/queries/diary';
import type { SessionRecord } from '@/db/queries/session';
import type { BodyOf } from '@/shared/contracts/contract';
import type { writeDiary } from '@/shared/contracts/session';
import { reportsLookBack } from '@/shared/rules/house-limits';
import {
  diaryAnswersSchema,
  diaryFactsOf,
  gradeOf,
  lockoutsAfterDiary,
  nextDayFactsOf,
  worstGradeOf,
  type LockoutFacts,
} from '@/shared/rules/lockout';
import { findingsOfEffects, looksOfDiary } from '@/shared/rules/lockout-findings';
import { effectGrades } from '@/shared/values/codes';

interface Asked {
  session: SessionRecord;
  startedAt: string;
  number: number;
  body: BodyOf<typeof writeDiary>;
  pages: readonly DiaryRecord[];
  photos: number;
}

async function loadPast(db: Db, { session, startedAt }: Asked) {
  const reports = await listEarlierReports(db, session.participantId, startedAt, reportsLookBack);
  return {
    headacheBefore: reports.map(({ headache }) => headache),
    worstGradeBefore: reports.map(({ worstGrade }) => effectGrades.find((grade) => grade === worstGrade) ?? gradeOf(0)),
  };
}

/** The facts that the rule asks for; the next day's page is judged beside what was said after the session. */
function factsOf({ body, pages, photos }: Asked, past: Awaited<ReturnType<typeof loadPast>>): LockoutFacts {
  if (body.kind === 'after') return { diary: diaryFactsOf(body.answers), ...past };
  const page = pages.find(({ kind }) => kind === 'after');
  const after = page && diaryAnswersSchema.parse(page.answers);
  return {
    diary: nextDayFactsOf(body.answers, after),
    headacheBefore: past.headacheBefore,
    // Somebody who wanted to send a photo and has not by now is asked about it.
    isPhotoAsked: after?.photoOffered === true,
    isPhotoSent: photos > 0,
  };
}

export async function judgePage(db: Db, asked: Asked) {
  const { body, session, number } = asked;
  const facts = factsOf(asked, await loadPast(db, asked));
  const found = lockoutsAfterDiary(facts);
  const isAfter = body.kind === 'after';
  const effects = isAfter ? body.answers.effects : [];
  const headache = facts.diary?.headache ?? 0;
  const report = {
    number,
    endReason: session.endReason,
    completeness: session.delivered?.completeness ?? null,
    effects,
  };
  const looks = isAfter && found.mayStart ? looksOfDiary(report, session.id) : [];
  return {
    effects: found.effects,
    findings: [...findingsOfEffects(found, { number, headache }), ...looks],
    emergencyAdvice: found.emergencyAdvice,
    headache,
    worstStrength: isAfter ? effects.reduce((worst, { strength }) => Math.max(worst, strength), 0) : null,
    worstGrade: isAfter ? worstGradeOf(body.answers) : null,
  };
}
