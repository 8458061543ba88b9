// What each fate means day by day: what is felt, what is missed, how a run goes, what staff do about it. `day` counts down to the present.

import { z } from 'zod';
import { act, Anything } from '@/server/demo/act';
import type { CastMember } from '@/server/demo/cast';
import { clinicianOf, coordinatorOf, prescribe, type Enrolled } from '@/server/demo/enrol';
import { demoPassword } from '@/server/demo/demo-password';
import type { Story } from '@/server/demo/story';
import { pauseCourse } from '@/server/features/course/pause-course';
import { readParticipant } from '@/server/features/participant/read-participant';
import { withdrawParticipant } from '@/server/features/participant/withdraw-participant';
import { recordReview } from '@/server/features/review/record-review';
import { readWorklist } from '@/server/features/worklist/read-worklist';
import type { DiaryAnswers, NextDayAnswers } from '@/shared/rules/lockout';
import type { SessionEventFact } from '@/shared/rules/session';
import type { EffectKind } from '@/shared/values/codes';

interface Felt {
  during: { atSeconds: number; sensation: string; strength: number }[];
  diary: DiaryAnswers;
}

const nothing: DiaryAnswers = { nothingFelt: true, effects: [], headacheAfter: 0, skin: 'ok', redFlags: [] };
const effect = (kind: EffectKind, strength: number) => ({ kind, strength, stillThere: false });

/** A usual day: tingling now and then, as most people report (Brunoni et al. 2011). */
function usual(day: number, grain: number): Felt {
  const felt = (day + grain) % 4;
  if (felt === 1) {
    return {
      during: [{ atSeconds: 40, sensation: 'tingling', strength: 2 }],
      diary: { ...nothing, nothingFelt: false, effects: [effect('tingling', 2)], skin: 'pink_fading' },
    };
  }
  if (felt === 3) return { during: [], diary: { ...nothing, nothingFelt: false, effects: [effect('itching', 1)] } };
  return { during: [], diary: nothing };
}

function headacheDay(strength: number): Felt {
  return {
    during: [{ atSeconds: 600, sensation: 'headache', strength: Math.max(1, strength - 1) }],
    diary: { ...nothing, nothingFelt: false, effects: [effect('headache', strength)], headacheAfter: strength },
  };
}

export function feltOn({ fate, name }: CastMember, day: number): Felt {
  if (fate === 'headaches' && day <= 3) return headacheDay(day === 3 ? 2 : day === 2 ? 4 : 6);
  if (fate === 'amended' && (day === 7 || day === 6)) return headacheDay(day === 7 ? 4 : 5);
  if (fate === 'blister' && day === 1) {
    return {
      during: [{ atSeconds: 500, sensation: 'burning', strength: 5 }],
      diary: { ...nothing, nothingFelt: false, effects: [effect('burning', 5)], skin: 'broken_or_blistered', redFlags: ['burn_or_blister'] },
    };
  }
  if (fate === 'skin' && day === 2) {
    return { during: [], diary: { ...nothing, nothingFelt: false, effects: [effect('skin_redness', 3)], skin: 'red' } };
  }
  return usual(day, name.length);
}

export function nextDayOn({ fate }: CastMember, day: number): NextDayAnswers {
  return { rednessStillThere: fate === 'skin' && day === 1, headacheNextDay: 0 };
}

/** Drifting: one here, two there, three at the end. Everybody else leaves out a day now and then. */
export function isMissed({ fate, name, sinceDays }: CastMember, day: number): boolean {
  if (fate === 'drifting') return day <= 3 || day % 5 === 0;
  if (fate === 'withdrawn') return day <= 2;
  return sinceDays > 9 && day === 4 + (name.length % 7);
}

/** Stopped early, contact lost for good, a short pause. */
export function wordsOn({ fate, name }: CastMember, day: number): SessionEventFact[] {
  if (fate === 'weak_contact' && day <= 2) return [[300 + 40 * day, 'contact_lost']];
  if (fate === 'amended' && day === 7) return [[720, 'stop']];
  if (fate === 'skin' && day === 2) return [[900, 'stop']];
  if ((day + name.length) % 9 === 0) {
    return [
      [420, 'pause'],
      [455, 'resume'],
    ];
  }
  return [];
}

const Course = z.object({ course: z.object({ id: z.string(), prescriptionId: z.string().nullable() }).nullable() });

/** What staff do at the end of the day. */
export async function afterwards(story: Story, member: CastMember, person: Enrolled, day: number): Promise<void> {
  const { house } = story;
  const params = { participantId: person.id };
  if (member.fate === 'amended' && day === 6) return amend(story, member, person);
  if (member.fate === 'paused' && day === 1) {
    const { course } = await act(house, readParticipant, await clinicianOf(story, member), { params }, Course);
    const body = { paused: true, reason: 'Away for a family matter' };
    if (course) await act(house, pauseCourse, await clinicianOf(story, member), { params: { courseId: course.id }, body }, Anything);
  }
  if (member.fate === 'withdrawn' && day === 1) {
    await act(house, withdrawParticipant, await coordinatorOf(story, member), { params, body: { reason: 'Has no time for it now' } }, Anything);
  }
  if (day >= 2) await tidy(story, member, person);
}

/** The clinician reviews what was reported, lowers the dose from 2.0 to 1.5 mA, and the participant confirms it. */
async function amend(story: Story, member: CastMember, person: Enrolled): Promise<void> {
  const { course } = await act(story.house, readParticipant, await clinicianOf(story, member), { params: { participantId: person.id } }, Course);
  if (!course?.prescriptionId) return;
  await tidy(story, member, person);
  await lift(story, member, person);
  const reason = 'Headache after two sessions; the dose is lowered and looked at again.';
  await prescribe(story, member, person, { intensityMilliamp: 1.5, amendsId: course.prescriptionId, reason });
}

/** The hold that the rising headache opened ends by the clinician's decision. */
async function lift(story: Story, member: CastMember, person: Enrolled): Promise<void> {
  const clinician = await clinicianOf(story, member);
  const list = await act(story.house, readWorklist, clinician, { query: { search: member.name, limit: '50' } }, readWorklist.contract.answer);
  for (const item of list.items) {
    if (item.participantId !== person.id || item.lockoutId === null) continue;
    const body = {
      itemId: item.id,
      finding: 'Spoke with the participant by telephone. The headache was gone by the evening.',
      decision: 'lift',
      reason: 'Goes on at a lower dose; to call at once if it grows.',
      grading: { severity: 'moderate', serious: false, causality: 'probable', expected: true },
      password: demoPassword,
    };
    await act(story.house, recordReview, clinician, { body }, Anything);
  }
}

/** Rows of a person that ask for no decision of weight are looked at the same evening; what is locked stays for whoever opens the demo. */
async function tidy(story: Story, member: CastMember, person: Enrolled): Promise<void> {
  const clinician = await clinicianOf(story, member);
  const list = await act(story.house, readWorklist, clinician, { query: { search: member.name, limit: '50' } }, readWorklist.contract.answer);
  for (const item of list.items) {
    if (item.participantId !== person.id || item.lockoutId !== null || item.level === 'due' || item.level === 'flag') continue;
    const body = {
      itemId: item.id,
      finding: 'Read the session and the diary.',
      decision: 'noted',
      reason: 'Within what is usual; asked to say so if it grows.',
      password: demoPassword,
    };
    await act(story.house, recordReview, clinician, { body }, Anything);
  }
}
