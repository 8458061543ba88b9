// What: a simulated stimulator on a bench: its clocks are turned by hand, its record lies in an IndexedDB in memory.
// Must not: wait for real time.
import { setImmediate } from 'node:timers';
import { openDeviceStore } from '@/components/runtime/device/device-state';
import { SimulatedStimulator, type DeviceParts } from '@/components/runtime/device/simulated-stimulator';
import { startsWeak } from '@/components/runtime/device/contact-model';
import { seedOf } from '@/components/runtime/device/chance';
import { deviceId, nowSeconds, nowText, type Signer } from './permits';

/** A serial number whose pads all sit well at once, so that a test does not have to press them. */
export const serial = Array.from({ length: 50 }, (_, index) => `SN-${index}`).find((candidate) =>
  ['F3', 'Fp2'].every((position) => {
    const seed = seedOf(`${candidate}:0:${position}`);
    return !startsWeak({ position, seed, placedAtSeconds: 0, attendedAtSeconds: null, isLifted: false });
  }),
);
export const electrodes = [
  { position: 'F3', polarity: 'anode' },
  { position: 'Fp2', polarity: 'cathode' },
] as const;

export interface Bench {
  device: SimulatedStimulator;
  /** Lets so many seconds pass in the page, a quarter of a second at a time. */
  pass(seconds: number): Promise<void>;
  /** The page goes away and another one opens `seconds` later by the phone's clock. */
  reload(seconds: number): Promise<Bench>;
}

let people = 0;
/** A fresh person, so that tests share no record. */
export function freshAccount(): string {
  people += 1;
  return `person-${people}`;
}

/** What was asked of the browser's cryptography and is not answered; it works beside the page, in its own time. */
let asked = 0;
for (const name of ['encrypt', 'decrypt', 'verify', 'generateKey', 'importKey'] as const) {
  const { subtle } = crypto;
  const own = Reflect.get(subtle, name);
  Object.defineProperty(subtle, name, {
    configurable: true,
    value: async (...words: unknown[]) => {
      asked += 1;
      try {
        return await Reflect.apply(own, subtle, words);
      } finally {
        asked -= 1;
      }
    },
  });
}

/** Enough turns for IndexedDB to finish what was asked of it, counted from the last answer of the cryptography. */
export async function settled(): Promise<void> {
  for (let turn = 0; turn < 60; turn += 1) {
    await new Promise((resolve) => setImmediate(resolve));
    if (asked > 0) turn = 0;
  }
}

export async function benchOf(
  accountId: string,
  extra: Partial<DeviceParts> = {},
  wall = { ms: nowSeconds * 1000 },
): Promise<Bench> {
  let monotonic = 100;
  let tick: (() => void) | null = null;
  const device = new SimulatedStimulator({
    monotonicSeconds: () => monotonic,
    wallMilliseconds: () => wall.ms,
    store: await openDeviceStore(accountId),
    every: (_ms, call) => {
      tick = call;
      return () => {
        tick = null;
      };
    },
    ...extra,
  });
  await device.open();
  return {
    device,
    async pass(seconds) {
      for (let quarter = 0; quarter < seconds * 4; quarter += 1) {
        monotonic += 0.25;
        wall.ms += 250;
        tick?.();
        if (quarter % 40 === 0) await settled();
      }
      await settled();
    },
    async reload(seconds) {
      await settled();
      device.close();
      await settled();
      wall.ms += seconds * 1000;
      return benchOf(accountId, extra, wall);
    },
  };
}

/** Paired, on the head, contact settled. */
export async function readyBench(
  house: Signer,
  accountId = freshAccount(),
  extra: Partial<DeviceParts> = {},
): Promise<Bench> {
  const bench = await benchOf(accountId, extra);
  await bench.device.pair({ deviceId, serial: serial ?? '', keys: [house.key], now: nowText });
  bench.device.measureContact(electrodes);
  await bench.pass(20);
  return bench;
}
