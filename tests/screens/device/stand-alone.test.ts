/** @jest-environment node */
// What: the simulated stimulator without a radio: it starts by one-time codes alone, at the dose that staff set, and keeps its own record.
import 'fake-indexeddb/auto';
import { codeEntryBounds } from '@/shared/rules/code-entry';
import { hotpCode } from '@/shared/rules/hotp';
import { benchOf, electrodes, freshAccount, serial, type Bench } from '@/tests/support/device/bench';
import { claimsOf, deviceId, nowText, signer } from '@/tests/support/device/permits';

/** The secret of RFC 4226, Appendix D. */
const secret = new TextEncoder().encode('12345678901234567890');
const dose = { intensityMilliamp: 2, rampUpSeconds: 30, holdSeconds: 60, rampDownSeconds: 30 };
const setUp = { serial: serial ?? '', secret, nextCounter: 3, dose, electrodes };
const codeOf = (counter: number) => hotpCode(secret, counter, codeEntryBounds.digits);

/** On the head, contact settled. */
async function worn(account = freshAccount(), change: Partial<typeof setUp> = {}): Promise<Bench> {
  const bench = await benchOf(account);
  expect(await bench.device.setUpStandAlone({ ...setUp, ...change })).toBe(true);
  bench.device.measureContact(electrodes);
  await bench.pass(20);
  return bench;
}

it('starts by the next code at the dose that staff set, and reads out what it gave', async () => {
  const { device, pass } = await worn();
  expect(await device.startByCode(codeOf(3))).toEqual({ started: true, counter: 3 });
  expect(device.runs()).toEqual([{ counter: 3, reason: null, onSeconds: null, chargeCoulomb: null }]);
  await pass(125);
  expect(device.status().session).toMatchObject({ endedWhy: 'complete', dose });
  const [run] = device.runs();
  expect(run).toMatchObject({ counter: 3, reason: 'complete', onSeconds: 120 });
  // 2 mA × (60 s + half of both ramps).
  expect(run?.chargeCoulomb).toBeCloseTo(0.18, 2);
});

it('takes no code twice and none from before the last one, a reload between', async () => {
  const account = freshAccount();
  const bench = await worn(account);
  expect(await bench.device.startByCode(codeOf(4))).toMatchObject({ started: true });
  await bench.pass(125);
  const later = await bench.reload(60);
  later.device.measureContact(electrodes);
  await later.pass(20);
  for (const counter of [3, 4]) {
    expect(await later.device.startByCode(codeOf(counter))).toMatchObject({ started: false, why: 'code_wrong' });
    await later.pass(20);
  }
  expect(await later.device.startByCode(codeOf(5))).toEqual({ started: true, counter: 5 });
  expect(later.device.runs().map(({ counter }) => counter)).toEqual([4, 5]);
});

it('makes a guesser wait, a reload between, and locks in the end', async () => {
  const account = freshAccount();
  const bench = await worn(account);
  expect(await bench.device.startByCode('00000000')).toEqual({ started: false, why: 'code_wrong', waitSeconds: 5 });
  expect(await bench.device.startByCode(codeOf(3))).toMatchObject({ why: 'code_wait' });
  const later = await bench.reload(0);
  later.device.measureContact(electrodes);
  await later.pass(2);
  expect(await later.device.startByCode(codeOf(3))).toMatchObject({ started: false });
  await later.pass(20);
  for (let time = 1; time < codeEntryBounds.mostWrong; time += 1) {
    await later.pass(5 * time);
    expect(await later.device.startByCode('00000000')).toMatchObject({ started: false });
  }
  await later.pass(60);
  expect(await later.device.startByCode(codeOf(3))).toMatchObject({ started: false, why: 'code_locked' });
  expect(later.device.runs()).toEqual([]);
}, 60_000);

it('uses up no code while a pad sits badly or lies elsewhere', async () => {
  const { device, pass } = await worn();
  device.lift('F3');
  expect(await device.startByCode(codeOf(3))).toEqual({ started: false, why: 'contact_not_good' });
  device.measureContact([
    { position: 'F4', polarity: 'anode' },
    { position: 'Fp1', polarity: 'cathode' },
  ]);
  await pass(20);
  expect(await device.startByCode(codeOf(3))).toEqual({ started: false, why: 'permit_other_placement' });
  device.measureContact(electrodes);
  await pass(20);
  expect(await device.startByCode(codeOf(3))).toEqual({ started: true, counter: 3 });
});

it('takes no permit once it is without a radio, and no code before', async () => {
  const house = await signer();
  const { device } = await benchOf(freshAccount());
  await device.pair({ deviceId, serial: serial ?? '', keys: [house.key], now: nowText });
  expect(await device.startByCode(codeOf(3))).toEqual({ started: false, why: 'not_set_up' });
  expect(await device.setUpStandAlone(setUp)).toBe(true);
  expect(await device.start(await house.sign(claimsOf()))).toEqual({ started: false, why: 'not_paired' });
});

it.each([
  ['a dose above the ceiling of current', { dose: { ...dose, intensityMilliamp: 4.1 } }],
  ['a dose above the ceiling of time', { dose: { ...dose, holdSeconds: 2400 } }],
  ['a dose above the ceiling of charge', { dose: { ...dose, intensityMilliamp: 4, holdSeconds: 1900 } }],
  ['no current', { dose: { ...dose, intensityMilliamp: 0 } }],
  ['a current that is no number', { dose: { ...dose, intensityMilliamp: Number.NaN } }],
  ['a secret that is too short', { secret: secret.slice(1) }],
])('cannot be set to %s', async (_what, change) => {
  const { device } = await benchOf(freshAccount());
  expect(await device.setUpStandAlone({ ...setUp, ...change })).toBe(false);
  expect(await device.startByCode(codeOf(3))).toEqual({ started: false, why: 'not_set_up' });
});
