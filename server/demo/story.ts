// The demo's weeks, day by day under the demo's clock: people are enrolled, trained, equipped and prescribed, run their sessions, write
// diaries; staff claim, review, amend. All by the real actions; a refusal that the story did not reckon with stops the day of that person only.

import { findDemoStep, insertDemoStep } from '@/db/queries/house';
import { readOffset, setOffset } from '@/db/queries/clock';
import { cast, storyDays, type CastMember } from '@/server/demo/cast';
import { act, DemoRefused, personOf, WithId } from '@/server/demo/act';
import { demoPassword } from '@/server/demo/demo-password';
import { enrol, makeReady, prescribe, type Enrolled } from '@/server/demo/enrol';
import { beginSession, finishSession, renewSupplies, type Begun } from '@/server/demo/play-session';
import { afterwards } from '@/server/demo/fates';
import { claimItem } from '@/server/features/worklist/claim-item';
import { readWorklist } from '@/server/features/worklist/read-worklist';
import type { House } from '@/server/house/open-house';
import { daySeconds } from '@/server/demo/times';

export interface Story {
  house: House;
  siteIds: Readonly<Record<string, string>>;
  people: Map<string, Enrolled>;
  say(line: string): void;
}

/** Sessions of the day: those who are done today three hours before the demo opens, all others a whole day before. Own choice. */
const earlierSeconds = 3 * 3600;
const sessionSeconds = 24 * 60;
const clinicians = { LS: 'clinician@harrowmere.example', MR: 'research.clinician@harrowmere.example' } as const;

/** Puts the clock `before` seconds before the present, never backwards; whatever comes due on the way runs. */
async function clockTo({ house }: Story, before: number): Promise<void> {
  const ahead = -before - (await readOffset(house.transact.db));
  if (ahead > 0) await house.runner.moveClock(ahead);
}

/** One person's part of a day; what is refused is said and the others go on. */
async function attempt<T>({ say }: Story, member: CastMember, work: () => Promise<T>): Promise<T | null> {
  try {
    return await work();
  } catch (error) {
    if (!(error instanceof DemoRefused)) throw error;
    say(`Demo: ${member.name}: ${error.message}`);
    return null;
  }
}

async function arrive(story: Story, member: CastMember, index: number): Promise<void> {
  const person = await enrol(story, member, index);
  story.people.set(member.name, person);
  if (member.fate === 'invited') return;
  await makeReady(story, member, person, index);
  if (member.fate !== 'training') await prescribe(story, member, person);
}

/** People do not wait for each other: so many act at once (own choice; the pool has fifteen connections). */
const atOnce = 6;

async function together<T>(items: readonly T[], work: (item: T) => Promise<void>): Promise<void> {
  for (let from = 0; from < items.length; from += atOnce) await Promise.all(items.slice(from, from + atOnce).map(work));
}

const hasCourse = ({ fate }: CastMember) => fate !== 'invited' && fate !== 'training' && fate !== 'second_signature';

/** Pages and holds of the day are taken, so that nobody is paged for ever; what came last stays open for whoever opens the demo. */
async function takePages(story: Story): Promise<void> {
  for (const site of ['LS', 'MR'] as const) {
    const clinician = await personOf(story.house, clinicians[site]);
    const page = await act(story.house, readWorklist, clinician, { query: { limit: '100' } }, readWorklist.contract.answer);
    for (const item of page.items) {
      if (item.level !== 'safety' || item.owner) continue;
      await act(story.house, claimItem, clinician, { params: { itemId: item.id }, body: { claim: true } }, WithId);
    }
  }
}

async function playSessions(story: Story, members: readonly CastMember[], day: number): Promise<void> {
  const begun: { member: CastMember; session: Begun }[] = [];
  await together(members, async (member) => {
    const person = story.people.get(member.name);
    if (!person) return;
    await renewSupplies(story, member, person);
    const session = await attempt(story, member, () => beginSession(story, member, person, day));
    if (session) begun.push({ member, session });
  });
  if (begun.length === 0) return;
  await story.house.runner.moveClock(sessionSeconds);
  await together(begun, async ({ member, session }) => void (await attempt(story, member, () => finishSession(story, member, session))));
  await takePages(story);
}

/** One day of the story; `day` counts down to 0, the day on which the demo opens. */
async function playDay(story: Story, day: number): Promise<void> {
  const isDoneToday = ({ fate }: CastMember) => fate === 'done_today';
  const running = cast.filter((member) => hasCourse(member) && member.sinceDays >= day && story.people.has(member.name));
  if (day > 0) {
    await clockTo(story, day * daySeconds + 2 * earlierSeconds);
    const arriving = [...cast.entries()].filter(([, member]) => member.sinceDays === day && !story.people.has(member.name));
    await together(arriving, async ([index, member]) => void (await attempt(story, member, () => arrive(story, member, index))));
  }
  const present = cast.filter((member) => hasCourse(member) && member.sinceDays >= day && story.people.has(member.name));
  await clockTo(story, day * daySeconds + earlierSeconds);
  await playSessions(story, (day > 0 ? present : running).filter(isDoneToday), day);
  if (day === 0) return;
  await clockTo(story, day * daySeconds);
  await playSessions(story, present.filter((member) => !isDoneToday(member)), day);
  await together(present, async (member) => {
    const person = story.people.get(member.name);
    if (person) await attempt(story, member, () => afterwards(story, member, person, day));
  });
}

/** Plays the whole story once, from the first enrolment to the present. */
export async function playStory(house: House, siteIds: Readonly<Record<string, string>>, say: (line: string) => void): Promise<void> {
  const { db } = house.transact;
  if ((await findDemoStep(db, 'story')) !== null) return;
  const story: Story = { house, siteIds, people: new Map(), say };
  for (let day = storyDays; day >= 0; day -= 1) {
    if (day % 4 === 0 || day === storyDays) say(`Demo: ${storyDays - day} of ${storyDays} days of history`);
    await playDay(story, day);
  }
  const behind = await readOffset(db);
  if (behind < 0) await house.runner.moveClock(-behind);
  await setOffset(db, 0);
  await insertDemoStep(db, 'story', { people: cast.length });
  say(`Demo: ${cast.length} people are there; the password of all is ${demoPassword}`);
}
