/** @jest-environment node */
// What: the simulated stimulator against everything a real one must withstand. Its clocks are turned by hand.
import 'fake-indexeddb/auto';
import { deliveredFrom } from '@/shared/rules/delivered';
import { benchOf, freshAccount, readyBench, settled, serial } from '@/tests/support/device/bench';
import {
  claimsOf,
  deviceId,
  nowSeconds,
  nowText,
  otherDeviceId,
  signer,
  type Signer,
} from '@/tests/support/device/permits';

let house: Signer;
beforeAll(async () => {
  house = await signer();
});

const sessionId = claimsOf().session;
const whole = { entry: 0, sample: 0 };

describe('the permit', () => {
  it('starts on a good permit', async () => {
    const { device } = await readyBench(house);
    expect(await device.start(await house.sign(claimsOf()))).toEqual({ started: true });
  });

  it('refuses a token whose dose was altered', async () => {
    const { device } = await readyBench(house);
    const [head, body, signature] = (await house.sign(claimsOf())).split('.');
    const altered = JSON.parse(Buffer.from(body ?? '', 'base64url').toString());
    altered.intensityMicroamp = 4000;
    const forged = [head, Buffer.from(JSON.stringify(altered)).toString('base64url'), signature].join('.');
    expect(await device.start(forged)).toEqual({ started: false, why: 'permit_altered' });
    expect(device.status().session).toBeNull();
  });

  it('refuses a token of another house, even under the same key name', async () => {
    const { device } = await readyBench(house);
    const stranger = await signer('house-1');
    const unknown = await signer('elsewhere');
    expect(await device.start(await stranger.sign(claimsOf()))).toEqual({ started: false, why: 'permit_altered' });
    expect(await device.start(await unknown.sign(claimsOf()))).toEqual({ started: false, why: 'permit_foreign' });
  });

  it('refuses a token without a signature', async () => {
    const { device } = await readyBench(house);
    const part = (value: unknown) => Buffer.from(JSON.stringify(value)).toString('base64url');
    const unsigned = `${part({ alg: 'none' })}.${part(claimsOf())}.`;
    const answer = await device.start(unsigned);
    expect(answer.started).toBe(false);
    expect(await device.start('no token at all')).toEqual({ started: false, why: 'permit_unreadable' });
  });

  it('refuses a permit from the instant at which it ends', async () => {
    const { device, pass } = await readyBench(house);
    const token = await house.sign(claimsOf({ exp: nowSeconds + 60 }));
    await pass(40);
    expect(await device.start(token)).toEqual({ started: false, why: 'permit_expired' });
  });

  it('refuses an ended permit though the phone’s clock was set back', async () => {
    const wall = { ms: nowSeconds * 1000 };
    const bench = await benchOf(freshAccount(), {}, wall);
    await bench.device.pair({ deviceId, serial: serial ?? '', keys: [house.key], now: nowText });
    bench.device.measureContact([
      { position: 'F3', polarity: 'anode' },
      { position: 'Fp2', polarity: 'cathode' },
    ]);
    await bench.pass(60);
    wall.ms -= 3_600_000;
    expect(await bench.device.start(await house.sign(claimsOf({ exp: nowSeconds + 60 })))).toEqual({
      started: false,
      why: 'permit_expired',
    });
  });

  it('refuses a permit for another stimulator', async () => {
    const { device } = await readyBench(house);
    const both = claimsOf({ aud: otherDeviceId, device: otherDeviceId });
    expect(await device.start(await house.sign(both))).toEqual({ started: false, why: 'permit_other_device' });
    const claim = claimsOf({ device: otherDeviceId });
    expect(await device.start(await house.sign(claim))).toEqual({ started: false, why: 'permit_other_device' });
  });

  it('refuses the same permit and every older one after it was used, a reload between', async () => {
    const bench = await readyBench(house);
    const token = await house.sign(claimsOf());
    await bench.device.start(token);
    await bench.pass(5);
    bench.device.stop('button');
    await bench.pass(12);
    expect(await bench.device.start(token)).toEqual({ started: false, why: 'permit_old' });
    const later = await bench.reload(5);
    const older = await house.sign(claimsOf({ counter: 6, jti: '0b5d1f0e-3f53-4d4e-9a53-5f0c4a1b2c3e' }));
    expect(await later.device.start(older)).toEqual({ started: false, why: 'permit_old' });
  });

  it('refuses a permit for other places on the head', async () => {
    const { device } = await readyBench(house);
    const montage = [
      { position: 'F4', polarity: 'anode' as const },
      { position: 'Fp1', polarity: 'cathode' as const },
    ];
    expect(await device.start(await house.sign(claimsOf({ montage })))).toEqual({
      started: false,
      why: 'permit_other_placement',
    });
  });

  it('refuses without good contact at every pad', async () => {
    const { device } = await readyBench(house);
    device.lift('Fp2');
    expect(await device.start(await house.sign(claimsOf()))).toEqual({ started: false, why: 'contact_not_good' });
  });

  it('refuses before it was paired', async () => {
    const { device } = await benchOf(freshAccount());
    expect(await device.start(await house.sign(claimsOf()))).toEqual({ started: false, why: 'not_paired' });
  });

  it('refuses when its record cannot be written', async () => {
    const full = {
      read: async () => ({ state: undefined, entries: [], samples: [] }),
      write: async () => Promise.reject(new Error('full')),
      close: () => undefined,
    };
    const { device } = await readyBench(house, freshAccount(), { store: full });
    expect(await device.start(await house.sign(claimsOf()))).toEqual({ started: false, why: 'record_unwritable' });
    expect(device.status().session).toBeNull();
  });
});

describe('the run', () => {
  it('never measures more than the permit allows, and delivers the prescribed charge', async () => {
    const { device, pass } = await readyBench(house);
    await device.start(await house.sign(claimsOf()));
    await pass(1262);
    const { samples, entries } = device.record(sessionId, whole);
    expect(Math.max(...samples.map(([, milliamp]) => milliamp ?? 0))).toBeLessThanOrEqual(2);
    const delivered = deliveredFrom(samples, { intensityMilliamp: 2, chargeCoulomb: 2.46, isFinal: true });
    expect(delivered.gaps).toEqual([]);
    expect(delivered.chargeCoulomb).toBeLessThanOrEqual(2.46);
    expect(delivered.fraction).toBeGreaterThan(0.99);
    expect(entries.at(-1)).toMatchObject({ kind: 'ended', reason: 'complete', atSeconds: 1260 });
    expect(entries.map(({ index }) => index)).toEqual(entries.map((_, place) => place));
  });

  it('goes on through a reload and measures the time between as one record without a gap', async () => {
    const bench = await readyBench(house);
    await bench.device.start(await house.sign(claimsOf()));
    await bench.pass(100);
    const before = bench.device.record(sessionId, whole).samples;
    const again = await bench.reload(300);
    const session = again.device.status().session;
    expect(session?.snapshot.state).toBe('hold');
    expect(session?.seconds).toBeCloseTo(400, 0);
    await again.pass(5);
    const { samples } = again.device.record(sessionId, whole);
    expect(samples.slice(0, before.length)).toEqual(before);
    expect(deliveredFrom(samples, { intensityMilliamp: 2 }).gaps).toEqual([]);
    expect(samples.length).toBeGreaterThan(400);
  });

  it('ends by plan while no page is open, and no later', async () => {
    const bench = await readyBench(house);
    await bench.device.start(await house.sign(claimsOf()));
    await bench.pass(700);
    const { device, pass } = await bench.reload(900);
    await pass(1);
    expect(device.status().session?.endedWhy).toBe('complete');
    const { samples } = device.record(sessionId, whole);
    expect(samples.at(-1)?.[0]).toBe(1260);
  });

  it.each([
    ['backwards', -60],
    ['longer than the whole session', 1300],
  ])('goes down from where it was when the phone’s clock went %s over a reload', async (_what, seconds) => {
    const bench = await readyBench(house);
    await bench.device.start(await house.sign(claimsOf()));
    await bench.pass(100);
    const { device, pass } = await bench.reload(seconds);
    expect(device.status().session?.stopWhy).toBe('clock_implausible');
    expect(device.status().session?.seconds).toBeLessThan(101);
    await pass(12);
    expect(device.status().session?.endedWhy).toBe('device_fault');
    const { entries, samples } = device.record(sessionId, whole);
    expect(entries).toContainEqual(expect.objectContaining({ kind: 'stop', why: 'clock_implausible' }));
    expect(samples.at(-1)?.[0]).toBeLessThan(112);
  });

  it('fades out over 10 s on Stop, and never steps down from above 0.5 mA', async () => {
    const { device, pass } = await readyBench(house);
    await device.start(await house.sign(claimsOf()));
    await pass(60);
    device.stop('button');
    expect(device.status().session?.snapshot.state).toBe('ramp_down');
    await pass(11);
    expect(device.status().session?.endedWhy).toBe('stopped');
    const { samples } = device.record(sessionId, whole);
    const steps = samples.slice(1).map(([, milliamp], place) => Math.abs((samples[place]?.[1] ?? 0) - (milliamp ?? 0)));
    expect(Math.max(...steps.slice(31))).toBeLessThan(0.5);
  });

  it('goes down when contact is lost for more than 3 s, and up again when it is back', async () => {
    const { device, pass } = await readyBench(house);
    await device.start(await house.sign(claimsOf()));
    await pass(60);
    device.lift('F3');
    await pass(2);
    expect(device.status().session?.snapshot.state).toBe('hold');
    await pass(14);
    expect(device.status().session?.snapshot).toMatchObject({ state: 'paused', pausedBy: 'contact' });
    expect(device.resume()).toBe(false);
    device.attend('F3');
    await pass(2);
    expect(device.status().session?.snapshot.state).toBe('ramp_up');
    const words = device.record(sessionId, whole).entries.map(({ kind }) => kind);
    expect(words.filter((word) => word === 'contact_lost' || word === 'contact_back')).toEqual([
      'contact_lost',
      'contact_back',
    ]);
  });

  it('stops itself when its output is more than 0.1 mA too high for a second, and starts nothing any more', async () => {
    const { device, pass } = await readyBench(house, freshAccount(), {
      faultMilliamp: (seconds) => (seconds > 50 ? 0.2 : 0),
    });
    await device.start(await house.sign(claimsOf()));
    await pass(70);
    expect(device.status().session?.endedWhy).toBe('over_current');
    const next = claimsOf({ counter: 8, session: '9a53e5f0-c4a1-4b2c-8d3e-4f5a6b7c8d9f' });
    expect(await device.start(await house.sign(next))).toEqual({ started: false, why: 'faulty' });
  });

  it('gives out only what is safely written', async () => {
    const { device } = await readyBench(house);
    await device.start(await house.sign(claimsOf()));
    await settled();
    const written = device.record(sessionId, whole).entries.length;
    device.pause();
    expect(device.record(sessionId, whole).entries).toHaveLength(written);
    await settled();
    expect(device.record(sessionId, whole).entries.at(-1)?.kind).toBe('pause');
  });

  it('says how far a demo’s faster time is ahead of real time', async () => {
    const { device, pass } = await readyBench(house);
    await device.start(await house.sign(claimsOf()));
    device.setPace(60);
    await pass(10);
    expect(device.status().session?.seconds).toBeCloseTo(600, 0);
    expect(device.secondsAhead()).toBeCloseTo(590, 0);
    await pass(15);
    expect(device.status().session?.endedWhy).toBe('complete');
    expect(device.pace()).toBe(1);
  });
});

describe('contact', () => {
  it('settles after the pads are put on', async () => {
    const bench = await benchOf(freshAccount());
    await bench.device.pair({ deviceId, serial: serial ?? '', keys: [house.key], now: nowText });
    bench.device.measureContact([{ position: 'F3', polarity: 'anode' }]);
    const first = bench.device.status().contacts[0]?.kiloohm ?? 0;
    await bench.pass(15);
    const later = bench.device.status().contacts[0]?.kiloohm ?? 0;
    expect(first).toBeGreaterThan(later);
    expect(bench.device.status().contacts[0]?.grade).toBe('good');
  });

  it('of a loose pad stays weak until it is wetted and pressed', async () => {
    const bench = await benchOf(freshAccount());
    await bench.device.pair({ deviceId, serial: 'SN-0', keys: [house.key], now: nowText });
    // Enough places that some pad of this set is loose.
    bench.device.measureContact(
      ['F3', 'F4', 'Fp1', 'Fp2', 'C3', 'C4', 'Cz', 'P3'].map((position) => ({ position, polarity: 'anode' as const })),
    );
    await bench.pass(20);
    const loose = bench.device.status().contacts.find(({ grade }) => grade !== 'good');
    expect(loose).toBeDefined();
    bench.device.attend(loose?.position ?? '');
    await bench.pass(6);
    expect(bench.device.status().contacts.find(({ position }) => position === loose?.position)?.grade).toBe('good');
  });
});
