/** @jest-environment node */
// What: the runner, its log and the sending around a stimulator on the bench: nothing lost, nothing twice, Stop before all else.
import 'fake-indexeddb/auto';
import { phoneStore } from '@/components/runtime/phone-store';
import { handOverDiary, refusalOf } from '@/components/runtime/unsent';
import { settled } from '@/tests/support/device/bench';
import { house, type House } from '@/tests/support/device/house';
import { signer, type Signer } from '@/tests/support/device/permits';
import { permitView, restAll, runBench, site, type RunBench } from '@/tests/support/device/run';

let key: Signer;
let server: House;
beforeAll(async () => {
  key = await signer();
});
beforeEach(() => {
  server = house();
  globalThis.fetch = (input, init) => server.fetch(input, init);
});

afterEach(restAll);

async function begun(): Promise<RunBench> {
  const made = await runBench(key);
  const identity = made.run.read().device?.identity;
  if (!identity) throw new Error('not paired');
  expect(await made.run.begin(await permitView(key), site, identity)).toEqual({ started: true });
  await made.pass(1);
  return made;
}

const sequences = () => server.events.map((event) => event.sequence).sort((a, b) => a - b);
const kinds = () => [...server.events].sort((a, b) => a.sequence - b.sequence).map((event) => event.kind);

it('sends a whole session once, numbered without a gap, the end last', async () => {
  const { pass, run, sender } = await begun();
  await pass(60);
  run.stop();
  await pass(12);
  await sender.flush();
  expect(run.read().phase).toBe('ended');
  expect(kinds().slice(0, 4)).toEqual(['identified', 'contact', 'contact', 'started']);
  expect(kinds().at(-1)).toBe('ended');
  expect(sequences()).toEqual(sequences().map((_, place) => place));
  const last = server.events.find((event) => event.kind === 'ended');
  expect(last).toMatchObject({ reason: 'stopped', lastSequence: server.events.length - 1 });
  expect(sender.read().count).toBe(0);
});

it('keeps what could not be sent, and each event reaches the server once though answers were lost', async () => {
  const { pass, run, sender } = await begun();
  server.isReachable = false;
  await pass(20);
  run.feel('tingling', 3);
  await pass(2);
  expect(sender.read().count).toBeGreaterThan(0);
  expect(sender.read().isOffline).toBe(true);
  server.isReachable = true;
  server.answersArrive = false;
  await sender.flush();
  server.answersArrive = true;
  run.stop();
  await pass(12);
  await sender.flush();
  expect(sender.read().count).toBe(0);
  expect(new Set(server.events.map((event) => event.id)).size).toBe(server.events.length);
  expect(sequences()).toEqual(sequences().map((_, place) => place));
  expect(server.events).toContainEqual(
    expect.objectContaining({ kind: 'sensation', sensation: 'tingling', strength: 3 }),
  );
});

it('finds the session again after a reload and goes on numbering where it was', async () => {
  const before = await begun();
  await before.pass(30);
  const after = await before.reload(200);
  expect(after.run.read()).toMatchObject({ phase: 'running', run: { sessionNumber: 8 } });
  await after.pass(10);
  after.run.stop();
  await after.pass(12);
  await after.sender.flush();
  expect(sequences()).toEqual(sequences().map((_, place) => place));
  const seconds = server.events.flatMap((event) => (event.kind === 'samples' ? event.samples.map(([at]) => at) : []));
  expect(new Set(seconds).size).toBe(seconds.length);
  const sorted = [...seconds].sort((a, b) => a - b);
  expect(Math.max(...sorted.slice(1).map((at, place) => at - (sorted[place] ?? 0)))).toBeLessThanOrEqual(1);
});

it('ramps down when the server says that the permit is void', async () => {
  const { pass, run } = await begun();
  await pass(40);
  server.rampDown = true;
  await pass(7);
  expect(run.read().device?.session?.stopWhy).toBe('permit_void');
  await pass(12);
  expect(server.events.find((event) => event.kind === 'ended')).toMatchObject({ reason: 'permit_void' });
});

it('stops on a red flag and on pain at a pad of 7, without a network, and shows the advice', async () => {
  const first = await begun();
  await first.pass(40);
  server.isReachable = false;
  first.run.raise('chest_pain');
  expect(first.run.read()).toMatchObject({
    run: { advice: 'chest_pain' },
    device: { session: { stopWhy: 'red_flag' } },
  });
  const second = await begun();
  await second.pass(40);
  expect(second.run.feel('burning', 6)).toBe(false);
  expect(second.run.feel('burning', 7)).toBe(true);
  expect(second.run.read().device?.session?.stopWhy).toBe('pain_high');
});

it('keeps refused events aside under their reason and goes on with the others', async () => {
  server.refuse.set('contact', 'sequence_taken');
  const { pass, accountId, sender } = await begun();
  await pass(10);
  await sender.flush();
  expect(sender.read()).toMatchObject({ count: 0 });
  expect(sender.read().refused).toBeGreaterThan(0);
  const aside = await (await phoneStore(accountId)).asides();
  expect(new Set(aside.map((row) => row.code))).toEqual(new Set(['sequence_taken']));
  expect(kinds()).toContain('started');
});

it('sends later, and does not put aside, what lies in the server’s future', async () => {
  server.refuse.set('samples', 'from_the_future');
  const { pass, sender } = await begun();
  await pass(10);
  await sender.flush();
  expect(sender.read().refused).toBe(0);
  expect(sender.read().events).toBeGreaterThan(0);
  server.refuse.clear();
  await sender.flush();
  await settled();
  expect(kinds()).toContain('samples');
});

it('keeps a diary that was written without a network, under one key', async () => {
  const { accountId, sender } = await runBench(key);
  server.isReachable = false;
  const diary = {
    key: 'diary-1',
    sessionId: '9a53e5f0-c4a1-4b2c-8d3e-4f5a6b7c8d9e',
    body: { kind: 'next_day' as const, answers: { rednessStillThere: false, headacheNextDay: 0 } },
  };
  expect(await handOverDiary(accountId, diary, null)).toBe(false);
  server.isReachable = true;
  await sender.flush();
  expect(server.diaries).toEqual([diary.body]);
  expect(await refusalOf(accountId, 'diary-1')).toBeNull();
});
