// One session of one person: the next day's questions if they are due, pre-check, permit, the device's record, diary. What they feel follows
// from their fate and the day, so that the demo is the same each time.

import { z } from 'zod';
import { act, Anything, personOf } from '@/server/demo/act';
import type { CastMember } from '@/server/demo/cast';
import { giveSupplies, helperCode, today, type Enrolled } from '@/server/demo/enrol';
import { feltOn, isMissed, nextDayOn, wordsOn } from '@/server/demo/fates';
import { scriptSession } from '@/server/demo/session-script';
import type { Story } from '@/server/demo/story';
import type { AccountActor } from '@/server/action';
import { readClearance } from '@/server/features/clearance/read-clearance';
import { readOwnDevice } from '@/server/features/device/read-own-device';
import { writeDiary } from '@/server/features/diary/write-diary';
import { issuePermit } from '@/server/features/permit/issue-permit';
import { answerPrecheck } from '@/server/features/precheck/answer-precheck';
import { sendEvents } from '@/server/features/session/send-events';
import { PermitView } from '@/shared/contracts/permit';
import { randomUUID } from 'node:crypto';

export interface Begun {
  actor: AccountActor;
  permit: z.infer<typeof PermitView>;
  device: { id: string; serial: string };
  day: number;
}

const batteryPercent = 86;
const firmware = '1.4.0';
/** Sponges are changed before their tenth use and their fourteenth day (guidance R56). */
const usesBeforeNew = 9;
const daysBeforeNew = 12;

export async function renewSupplies(story: Story, member: CastMember, person: Enrolled): Promise<void> {
  if (person.spongesOn === null) return;
  const isOld = person.spongesOn <= (await today(story, -daysBeforeNew));
  if (isOld || person.spongeUses >= usesBeforeNew) await giveSupplies(story, member, person);
}

/** Pre-check and permit; null when nothing may start today, or the person leaves the day out. */
export async function beginSession(story: Story, member: CastMember, person: Enrolled, day: number): Promise<Begun | null> {
  const { house } = story;
  const actor = await personOf(house, person.email);
  const answer = await act(house, readClearance, actor, { query: {} }, readClearance.contract.answer);
  if (answer.nextDayDueSessionId) {
    const body = { kind: 'next_day', answers: nextDayOn(member, day) };
    await act(house, writeDiary, actor, { params: { sessionId: answer.nextDayDueSessionId }, body }, Anything);
  }
  if (isMissed(member, day) || !answer.courseId) return null;
  const asked = answer.nextDayDueSessionId ? await act(house, readClearance, actor, { query: {} }, readClearance.contract.answer) : answer;
  if (!asked.readyForPrecheck) return null;
  const answers = {
    ...{ seizure: 'no', faint: 'no', headInjury: 'no', implantOrMetal: false, skin: 'ok', mood: [], headache: 0, sleptHours: 7, drinksLast12h: 0 },
    ...{ drinks12To24h: 0, feelsAlcohol: false, drugs24h: false, newMedicine: 'none', unwell: false, ready: true },
    ...(asked.precheckFacts.excludesPregnancy ? { pregnancyChance: false } : {}),
  };
  const precheck = await act(house, answerPrecheck, actor, { body: { answers, ...(asked.precheckFacts.helperAsked ? { helperCode } : {}), language: 'en' } }, z.object({ id: z.string() }));
  const device = await act(house, readOwnDevice, actor, {}, z.object({ id: z.string(), serial: z.string() }));
  const body = { courseId: answer.courseId, precheckId: precheck.id, batteryPercent, deviceId: device.id };
  const permit = await act(house, issuePermit, actor, { body, key: randomUUID() }, PermitView);
  person.spongeUses += 1;
  return { actor, permit, device, day };
}

/** The device's record and the diary. */
export async function finishSession(story: Story, member: CastMember, { actor, permit, device, day }: Begun): Promise<void> {
  const { house } = story;
  const { during, diary } = feltOn(member, day);
  const events = scriptSession({
    dose: permit.dose,
    counter: permit.counter,
    device: { ...device, firmware },
    words: wordsOn(member, day),
    sensations: during,
    grain: permit.counter + member.name.length * 17,
  });
  await act(house, sendEvents, actor, { params: { permitId: permit.id }, body: { events } }, Anything);
  await act(house, writeDiary, actor, { params: { sessionId: permit.sessionId }, body: { kind: 'after', answers: diary } }, Anything);
}
