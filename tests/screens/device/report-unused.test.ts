/** @jest-environment node */
// What: what the phone says of a permit that ran out: only the stimulator that would know says that it never began.
import 'fake-indexeddb/auto';
import { house, type House } from '@/tests/support/device/house';
import { otherDeviceId, signer, type Signer } from '@/tests/support/device/permits';
import { permitView, restAll, runBench, site } from '@/tests/support/device/run';

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

it('says that a permit was never begun on, as the first event of its session', async () => {
  const { run } = await runBench(key);
  expect(await run.unusedEvent(await permitView(key))).toMatchObject({
    ...{ sequence: 0, lastSequence: 0, kind: 'ended', reason: 'permit_void', onSeconds: 0, chargeCoulomb: 0 },
  });
});

it('numbers it after what was logged on the way to a start that the stimulator refused', async () => {
  const { run, sender } = await runBench(key);
  const identity = run.read().device?.identity;
  if (!identity) throw new Error('not paired');
  const permit = await permitView(key);
  expect(await run.begin({ ...permit, token: 'not a permit' }, site, identity)).toMatchObject({ started: false });
  await sender.flush();
  const logged = server.events.length;
  expect(await run.unusedEvent(permit)).toMatchObject({ sequence: logged, lastSequence: logged });
  expect(logged).toBeGreaterThan(0);
});

it('says nothing of a permit from before its memory begins', async () => {
  const { run } = await runBench(key);
  const permit = await permitView(key);
  expect(await run.unusedEvent({ ...permit, issuedAt: '2020-01-01T00:00:00.000Z' })).toBeNull();
});

it('says nothing of a permit that it began on, nor of another stimulator’s', async () => {
  const { run, pass } = await runBench(key);
  const identity = run.read().device?.identity;
  if (!identity) throw new Error('not paired');
  const permit = await permitView(key);
  expect(await run.unusedEvent({ ...permit, deviceId: otherDeviceId })).toBeNull();
  expect(await run.begin(permit, site, identity)).toEqual({ started: true });
  await pass(5);
  run.stop();
  await pass(12);
  expect(await run.unusedEvent(permit)).toBeNull();
});
