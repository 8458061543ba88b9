// Who may pass which door: every door, every kind of person, own and other sites and records, against what `who` and `reach` say.
// And what no answer may hold, whoever asked: walked with the same requests.

import { randomUUID } from 'node:crypto';
import type { Response } from 'supertest';
import { doors } from '@/shared/contracts/doors';
import { knockAt } from '../support/knock';
import { allKnocks, nameOf, titled, type Knock } from '../support/samples';
import { words } from '../support/whole-record';
import { everybody, openWorld, standingOf, type Standing, type Who, type World } from '../support/world';

interface Heard {
  who: Who;
  knock: Knock;
  status: number;
  text: string;
}

let world: World;
const heard: Heard[] = [];
const walked = new Set<string>();
const knocks = allKnocks();

beforeAll(async () => {
  world = await openWorld();
}, 120_000);
afterAll(() => world.close());

/** In the way although the door is open to them: what is asked cannot be done, each by its rule. */
const refusedByRule: Partial<Record<string, Partial<Record<Who, string>>>> = {
  'answerPrecheck of nothing': {
    'participant, same site': '409 course.none',
    'participant, other site': '409 course.none',
    'participant, withdrawn': '409 course.none',
  },
  'issuePermit of person': { 'participant, withdrawn': '409 clearance.refused' },
  'acknowledgePrescription of person': { 'participant, withdrawn': '409 version.stale' },
  'addPhoto of person': { 'participant, withdrawn': '409 photo.no_consent' },
  'inviteCaregiver of nothing': { 'participant, withdrawn': '409 participant.withdrawn' },
};

/** Staff and caregivers have no record of their own: they must say whose they mean. */
const mustName = ['readClearance of nothing', 'listMessages of nothing', 'sendMessage of nothing'];

/** How far a door reaches for somebody whose role it serves. */
function isInReach({ sample }: Knock, standing: Standing): boolean {
  if (sample.names === 'nothing') return true;
  if (sample.names === 'site') return standing.atSite === true;
  if (standing.role === 'participant') return standing.isOwner === true;
  if (standing.role === 'administrator') return false;
  return standing.atSite === true;
}

/** A caregiver sees what is shared, and beside an assisted session (as this one is) whether it may start. */
function isShared({ contract, sample }: Knock, standing: Standing): boolean {
  if (sample.names === 'nothing') return true;
  return contract.reach === 'shared' ? standing.sharesDiary === true : standing.isLinked === true;
}

function expected(knock: Knock, who: Who): string {
  const { contract } = knock;
  const standing = standingOf(who);
  const done = String(contract.status ?? 200);
  if (contract.reach === 'open') return done;
  if (standing.role === null) return '401 not_signed_in';
  if (standing.isSuspended) return '403 account.suspended';
  if (!contract.who.includes(standing.role)) return '403 role.not_allowed';
  const reaches = standing.role === 'caregiver' ? isShared(knock, standing) : isInReach(knock, standing);
  if (!reaches) return '404 not_found';
  if (mustName.includes(nameOf(knock)) && standing.role !== 'participant') return '422 invalid';
  return refusedByRule[nameOf(knock)]?.[who] ?? done;
}

async function walk(knock: Knock): Promise<Record<string, string>> {
  const { contract, sample } = knock;
  const found: Record<string, string> = {};
  const known = await sample.ask(world, sample.by);
  for (const who of everybody) {
    // Whoever gets through changes something, so each of them asks for a thing of their own.
    const asked = /^(2|409|422)/.test(expected(knock, who)) ? await sample.ask(world, who) : known;
    const answer = await knockAt(await world.as(who), contract, asked, contract.once ? randomUUID() : undefined);
    const { code } = answer.type === 'application/problem+json' ? answer.body : { code: undefined };
    found[who] = code === undefined ? String(answer.status) : `${answer.status} ${code}`;
    const bytes = Buffer.isBuffer(answer.body) ? answer.body.toString('latin1') : answer.text;
    heard.push({ who, knock, status: answer.status, text: bytes });
  }
  walked.add(knock.door);
  return found;
}

it.each(titled(knocks))(
  '%s lets in whom who and reach let in, and nobody else',
  async (_name, knock) => {
    expect(await walk(knock)).toEqual(Object.fromEntries(everybody.map((who) => [who, expected(knock, who)])));
  },
  60_000,
);

describe('after all of these', () => {
  const answersTo = (who: Who, demoToo = false) =>
    heard.filter((each) => each.who === who && each.status < 300 && (demoToo || !each.knock.contract.demo));
  /** Where a text is found, by the names of the doors. */
  const foundIn = (answers: readonly Heard[], text: string | RegExp) =>
    answers
      .filter((each) => (typeof text === 'string' ? each.text.includes(text) : text.test(each.text)))
      .map(({ knock }) => nameOf(knock));
  const identityOf = ({ record }: World) => {
    const { patient } = record;
    return [...patient.name.split(' '), patient.email, '020 7946 0142', '020 7946 0143', '1984-03-02', 'Tam'];
  };

  it('every door was walked with everybody: a new one needs a row in the samples, and this number', () => {
    expect([...walked].sort()).toEqual(Object.keys(doors).sort());
    expect(Object.keys(doors)).toHaveLength(72);
    expect(heard).toHaveLength(knocks.length * everybody.length);
    expect(knocks).toHaveLength(82);
    expect(everybody).toHaveLength(19);
  });

  /** The whole trail of the record, page after page. */
  async function trailFor(who: Who): Promise<string> {
    const browser = await world.as(who);
    const answers: Response[] = [];
    do {
      const cursor: unknown = answers.at(-1)?.body.nextCursor;
      const query = { participantId: world.record.patient.participantId, limit: '100', ...(cursor ? { cursor } : {}) };
      answers.push(await browser.get('/api/audit').query(query).expect(200));
    } while (answers.at(-1)?.body.nextCursor);
    return answers.map(({ text }) => text).join();
  }

  it('those who may met the names, the words and the dose, so that their absence elsewhere says something', async () => {
    const own = answersTo('participant, self');
    for (const text of [words.diary, words.message, world.record.patient.code, 'intensityMilliamp'])
      expect([text, foundIn(own, text).length > 0]).toEqual([text, true]);
    const seen =
      answersTo('clinician, own site')
        .map(({ text }) => text)
        .join() + (await trailFor('clinician, own site'));
    for (const text of [...identityOf(world), ...Object.values(words)])
      expect([text, seen.includes(text)]).toEqual([text, true]);
  });

  it('the monitor met nobody’s name, address or telephone, nor what they or others wrote about them', async () => {
    const answers = answersTo('monitor, own site');
    expect(answers.length).toBeGreaterThan(20);
    const trail = await trailFor('monitor, own site');
    const identity = [...identityOf(world), 'Sabra', 'Nial', 'Adair', 'Remy', 'Quince', 'Yelland'];
    const { diary, message, reply, helper, remark, screening, finding, ...reasons } = words;
    for (const text of [...identity, diary, message, reply, helper, remark, screening, finding]) {
      const alone = new RegExp(`(?<![\\w-])${text}(?![\\w-])`);
      expect([text, foundIn(answers, alone), alone.test(trail)]).toEqual([text, [], false]);
    }
    // Why something was changed is what the trail is for; elsewhere it stays out.
    for (const text of Object.values(reasons)) {
      expect([text, foundIn(answers, text).filter((name) => !name.startsWith('readAudit'))]).toEqual([text, []]);
      expect([text, trail.includes(text)]).toEqual([text, true]);
    }
  });

  it('no caregiver met a dose', () => {
    for (const who of everybody.filter((each) => standingOf(each).role === 'caregiver')) {
      expect([who, foundIn(answersTo(who), /milliamp|coulomb|electrode|waveform|rampUp|"dose":(?!null)/i)]).toEqual([
        who,
        [],
      ]);
    }
  });

  it('a caregiver met only what is shared', () => {
    const diaryOf = (who: Who) => foundIn(answersTo(who), /tingling|"headache":\d/);
    expect(diaryOf('caregiver, nothing shared')).toEqual([]);
    expect(diaryOf('caregiver, adherence shared')).toEqual([]);
    expect(diaryOf('caregiver, diary shared')).toEqual(expect.arrayContaining(['readSharedDiary of person']));
    const marks = (who: Who) => foundIn(answersTo(who), '"marks":[{');
    expect(marks('caregiver, nothing shared')).toEqual([]);
    expect(marks('caregiver, adherence shared')).toEqual(['readShared of nothing']);
    for (const who of ['caregiver, nothing shared', 'caregiver, adherence shared', 'caregiver, diary shared'] as const)
      for (const text of [words.diary, words.message, 'Ashgrove'])
        expect([who, text, foundIn(answersTo(who), text)]).toEqual([who, text, []]);
  });

  it('the administrator met no diary and no message', () => {
    const answers = answersTo('administrator, own site');
    expect(answers.length).toBeGreaterThan(8);
    for (const text of [words.diary, words.message, words.reply, /tingling|"headache|"skin"|redFlags|freeText/])
      expect([String(text), foundIn(answers, text)]).toEqual([String(text), []]);
    expect(foundIn(answers, world.record.patient.name)).toEqual([]);
  });

  it('nobody out of reach met the record at all', () => {
    const strangers = everybody.filter((who) => {
      const { isOwner, isLinked, atSite, isSuspended } = standingOf(who);
      return isSuspended || !(isOwner || isLinked || atSite);
    });
    expect(strangers).toHaveLength(10);
    const { patient, courseId, permit } = world.record;
    for (const who of strangers)
      for (const text of [patient.participantId, patient.code, patient.name, patient.email, courseId, permit.id])
        expect([who, text, foundIn(answersTo(who), text)]).toEqual([who, text, []]);
  });
});
