// Whatever a stimulator or a phone can send of a session: what is accepted is named, what is refused is named with its reason, and nothing
// is half-written.

import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { sendEvents, type SessionEvent } from '@/shared/contracts/permit';
import { mostEventsPerSession } from '@/shared/rules/house-limits';
import { Problem } from '@/shared/contracts/problem';
import type { PermitView } from '@/shared/contracts/permit';
import {
  answer,
  numbered,
  permitFor,
  readyPatient,
  runUpTo,
  samplesOf,
  wholeRun,
  type ReadyPatient,
} from '../support/running';
import { fingerprints } from '../support/tables';
import { openWorld, type Browser, type World } from '../support/world';

let world: World;
let browser: Browser;
let ready: ReadyPatient;
let permit: PermitView;

beforeAll(async () => {
  world = await openWorld();
  await begin();
}, 180_000);
afterAll(() => world.close());

/** Somebody whose session runs since 10 minutes: the first 5 minutes are with the server. One serves all tests that write nothing. */
async function begin(): Promise<void> {
  ready = await readyPatient(world.clinic, world.people['clinician, own site'], world.siteId);
  await world.clinic.client.pool.query(
    `update auth_credential set password = (select password from auth_credential where user_id = $1) where user_id = $2`,
    [world.people['participant, self'].accountId, ready.patient.accountId],
  );
  browser = await world.signIn(ready.patient.email);
  permit = await permitFor(world.clinic, ready);
  await world.clinic.advance(600);
  const answered = await post(numbered(runUpTo(permit, 299)));
  expect([answered.status, answered.body.refused]).toEqual([200, []]);
}

const post = (events: unknown, of = permit.id) => browser.post(`/api/permits/${of}/events`).send({ events });
const kept = async () => {
  const rows = await world.clinic.rows(
    { id: z.string() },
    `select e.id from session_event e join session s on s.id = e.session_id where s.permit_id = $1 order by e.sequence`,
    [permit.id],
  );
  return rows.map(({ id }) => id);
};

/** The next event in order: a minute of samples. */
function good(sequence = 100): SessionEvent {
  const [event] = numbered(
    [{ kind: 'samples', atSeconds: 300, samples: samplesOf(2, 300, 310), impedance: [] }],
    sequence,
  );
  if (!event) throw new Error('no event');
  return event;
}
const withSamples = (...samples: unknown[]) => ({ ...good(), samples });

/** Refused by its shape: the answer names the place, and nothing of the batch is written. */
const shapeless: [what: string, event: () => unknown, path: string][] = [
  ['a current that is no number', () => withSamples([300, null]), 'events.1.samples.0.1'],
  ['a current in words', () => withSamples([300, 'two']), 'events.1.samples.0.1'],
  ['a current of 2000 mA', () => withSamples([300, 2000]), 'events.1.samples.0.1'],
  ['a current of −21 mA', () => withSamples([300, -21]), 'events.1.samples.0.1'],
  ['a sample without a current', () => withSamples([300]), 'events.1.samples.0'],
  ['a sample before the start', () => withSamples([-1, 2]), 'events.1.samples.0.0'],
  ['a time of 1970', () => ({ ...good(), at: '1970-01-01T00:00:00Z' }), 'events.1'],
  ['seconds since 1970', () => ({ ...good(), atSeconds: 1_780_000_000 }), 'events.1.atSeconds'],
  ['a time before the start', () => ({ ...good(), atSeconds: -0.5 }), 'events.1.atSeconds'],
  ['a number between two', () => ({ ...good(), sequence: 100.5 }), 'events.1.sequence'],
  ['a number below 0', () => ({ ...good(), sequence: -1 }), 'events.1.sequence'],
  ['no id', () => ({ ...good(), id: undefined }), 'events.1.id'],
  ['an id that is none', () => ({ ...good(), id: '1' }), 'events.1.id'],
  ['a kind that is not known', () => ({ ...good(), kind: 'horoscope' }), 'events.1.kind'],
  ['601 samples in one event', () => withSamples(...samplesOf(2, 0, 600)), 'events.1.samples'],
  ['no sample', () => withSamples(), 'events.1.samples'],
  [
    'more than the batch may hold of a word',
    () => ({ ...good(), kind: 'sensation', sensation: 'x'.repeat(41), strength: 3 }),
    'events.1',
  ],
];

describe('a batch with an event that is none', () => {
  it.each(shapeless)('is refused whole for %s, by the event’s place and with a reason', async (_what, bad, path) => {
    const before = await fingerprints(world.clinic);
    const refused = await post([good(101), bad()]);
    const problem = Problem.parse(refused.body);
    expect([refused.status, problem.code]).toEqual([422, 'invalid']);
    const fields = problem.fields ?? [];
    expect(fields.filter((field) => field.path === path || field.path.startsWith(`${path}.`))).not.toEqual([]);
    expect(fields.every((field) => field.path.startsWith('events.1') && field.message.length > 0)).toBe(true);
    expect(await fingerprints(world.clinic)).toEqual(before);
  });

  it('names every event that is none, and none that is one', async () => {
    const refused = await post([withSamples([300, 99]), good(101), { ...good(102), atSeconds: -1 }]);
    const places = new Set((Problem.parse(refused.body).fields ?? []).map((field) => field.path.split('.')[1]));
    expect([refused.status, places]).toEqual([422, new Set(['0', '2'])]);
  });

  it.each([
    ['is cut off half-way', (whole: string) => whole.slice(0, whole.length / 2)],
    ['says NaN', (whole: string) => whole.replace('300', 'NaN')],
    ['says Infinity', (whole: string) => whole.replace('300', '-Infinity')],
  ])('is refused unread when it %s', async (_what, spoil) => {
    const before = await fingerprints(world.clinic);
    const refused = await browser
      .post(`/api/permits/${permit.id}/events`)
      .set('content-type', 'application/json')
      .send(spoil(JSON.stringify({ events: [good()] })));
    expect([refused.status, refused.body.code]).toEqual([400, 'body.malformed']);
    expect(await fingerprints(world.clinic)).toEqual(before);
  });

  it('is refused for a number beyond all numbers', async () => {
    const text = JSON.stringify({ events: [good()] }).replace('"atSeconds":300', '"atSeconds":1e999');
    const refused = await browser
      .post(`/api/permits/${permit.id}/events`)
      .set('content-type', 'application/json')
      .send(text);
    expect(refused.status).toBe(422);
  });
});

describe('more than a session can hold', () => {
  it('is refused by the batch, by the number and by the size', async () => {
    const before = await kept();
    const many = Array.from({ length: 501 }, (_, index) => good(1000 + index));
    expect((await post(many)).status).toBe(422);
    expect((await post(Array.from({ length: 400 }, () => withSamples(...samplesOf(2, 0, 599))))).status).toBe(413);
    const refused = await post([good(mostEventsPerSession), good(999_999)]);
    const codes = (Problem.parse(refused.body).fields ?? []).map(({ code }) => code);
    expect([refused.status, codes]).toEqual([422, ['event_too_many', 'event_too_many']]);
    expect(await kept()).toEqual(before);
  });

  it('is named beside what is kept, and an end that could never be whole is refused', async () => {
    await begin();
    const [last] = numbered(
      [{ kind: 'ended', atSeconds: 310, reason: 'stopped', onSeconds: 310, chargeCoulomb: 0, lastSequence: 900_000 }],
      101,
    );
    const fine = good();
    const { status, body } = await post([fine, last, good(mostEventsPerSession)]);
    expect([status, body.stored, body.refused.map(({ code }: { code: string }) => code)]).toEqual([
      200,
      [fine.id],
      ['too_many', 'too_many'],
    ]);
    expect(body.sessionState).toBe('running');
  });
});

describe('a batch of which half is good', () => {
  it('keeps the good half by name and refuses the other half by name and reason', async () => {
    await begin();
    const [first] = await kept();
    const [fine, known] = [good(100), good(101)];
    await post([known]);
    const late = { ...good(102), atSeconds: 5000 };
    const taken = good(101);
    const other = { ...known, atSeconds: 301 };
    const { status, body } = await post([late, fine, known, taken, other, { ...good(103), id: first }]);
    expect(status).toBe(200);
    expect([body.stored, body.known]).toEqual([[fine.id], [known.id]]);
    expect(body.refused).toEqual([
      { id: late.id, code: 'from_the_future' },
      { id: taken.id, code: 'sequence_taken' },
      { id: other.id, code: 'other_content' },
      { id: first, code: 'other_content' },
    ]);
    expect((await kept()).slice(-2)).toEqual([fine.id, known.id]);
  });

  it('is refused by its fields when all of it lies ahead, as a clock of 2100 would have it', async () => {
    const before = await kept();
    const refused = await post([{ ...good(), atSeconds: 86_400 }, withSamples([86_399, 2])]);
    const codes = (Problem.parse(refused.body).fields ?? []).map(({ code }) => code);
    expect([refused.status, codes]).toEqual([422, ['event_from_the_future', 'event_from_the_future']]);
    expect(await kept()).toEqual(before);
  });
});

it('counts samples out of order, twice and below zero by their time and magnitude', async () => {
  const charge = async (samples: [number, number][]) => {
    const own = await readyPatient(world.clinic, world.people['clinician, own site'], world.siteId);
    const given = await permitFor(world.clinic, own);
    await world.clinic.advance(400);
    const params = { permitId: given.id };
    const said = numbered([
      { kind: 'started', atSeconds: 0, counter: given.counter },
      { kind: 'samples', atSeconds: 0, samples, impedance: [] },
      { kind: 'ended', atSeconds: 300, reason: 'stopped', onSeconds: 0, chargeCoulomb: 0, lastSequence: 2 },
    ]);
    const { sendEvents: action } = await import('@/server/features/session/send-events');
    await world.clinic.call(own.patient, action, { params, body: { events: said } });
    const [row] = await world.clinic.rows(
      { delivered_uc: z.coerce.number(), upper_uc: z.coerce.number() },
      'select delivered_uc, upper_uc from session where permit_id = $1',
      [given.id],
    );
    return row;
  };
  const inOrder = samplesOf(2, 0, 300);
  const plain = await charge(inOrder);
  expect(plain?.delivered_uc).toBeGreaterThan(0);
  expect(await charge([...inOrder].reverse())).toEqual(plain);
  expect(await charge([...inOrder, ...inOrder].slice(0, 600))).toEqual(plain);
  expect(await charge(inOrder.map(([at, milliamp]): [number, number] => [at, -milliamp]))).toEqual(plain);
});

it('takes nothing for a permit of somebody else, of nobody, or of no shape', async () => {
  const before = await fingerprints(world.clinic);
  expect((await post([good()], world.record.permit.id)).status).toBe(404);
  expect((await post([good()], randomUUID())).status).toBe(404);
  expect((await post([good()], 'mine')).status).toBe(404);
  expect(await fingerprints(world.clinic)).toEqual(before);
});

it('keeps what comes after days, once, and closes the session by it', async () => {
  await begin();
  const whole = wholeRun(permit);
  await world.clinic.advance(5 * 86_400);
  const rest = whole.slice((await kept()).length);
  const { body } = await post(rest);
  expect([body.refused, body.missing, body.sessionState]).toEqual([[], [], 'closed']);
  expect((await post(rest)).body.known).toEqual(rest.map(({ id }) => id));
  expect(await answer(world.clinic, ready.patient)).toBeTruthy();
});

it('holds no more in one batch than its contract says', () => {
  expect(sendEvents.body.safeParse({ events: [] }).success).toBe(false);
});
