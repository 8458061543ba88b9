// What: a simulated stimulator in memory that is driven by a seed, many thousand times: no database, no waiting, its clocks turned by hand.
// Must not: wait for real time, or share anything between two of them.
import type { DeviceStore, KeptState } from '@/components/runtime/device/device-state';
import { setImmediate } from 'node:timers';
import { SimulatedStimulator, type DeviceParts } from '@/components/runtime/device/simulated-stimulator';
import type { DeviceEntry } from '@/components/runtime/device/stimulator';
import type { Sample } from '@/shared/rules/delivered';
import { electrodes, serial } from './bench';
import { deviceId, nowSeconds, nowText, type Signer } from './permits';

/** Keeps as the real one does, all or nothing, without IndexedDB. */
function memoryStore(): DeviceStore {
  let state: KeptState | undefined;
  const entries: DeviceEntry[] = [];
  const samples: Sample[] = [];
  return {
    read: async () => ({ state: state && structuredClone(state), entries: [...entries], samples: [...samples] }),
    async write(newer, moreEntries, moreSamples) {
      // A new session begins an empty record.
      if (state?.session?.sessionId !== newer.session?.sessionId) {
        entries.length = 0;
        samples.length = 0;
      }
      state = newer;
      entries.push(...moreEntries);
      samples.push(...moreSamples);
    },
    close: () => undefined,
  };
}

/** Lets everything that is being written be written. */
export async function rested(): Promise<void> {
  for (let turn = 0; turn < 3; turn += 1) await new Promise((resolve) => setImmediate(resolve));
}

export class SeededDevice {
  private monotonic = 100;
  private wallMs = nowSeconds * 1000;
  private tick: (() => void) | null = null;
  private readonly store = memoryStore();
  device: SimulatedStimulator;

  private constructor(private readonly extra: Partial<DeviceParts>) {
    this.device = this.made();
  }

  private made(): SimulatedStimulator {
    return new SimulatedStimulator({
      monotonicSeconds: () => this.monotonic,
      wallMilliseconds: () => this.wallMs,
      store: this.store,
      every: (_ms, call) => {
        this.tick = call;
        return () => {
          this.tick = null;
        };
      },
      ...this.extra,
    });
  }

  /** Paired, on the head, contact settled. */
  static async ready(house: Signer, extra: Partial<DeviceParts> = {}): Promise<SeededDevice> {
    const made = new SeededDevice(extra);
    await made.device.open();
    await made.device.pair({ deviceId, serial: serial ?? '', keys: [house.key], now: nowText });
    made.device.measureContact(electrodes);
    made.pass(20);
    await rested();
    return made;
  }

  /** Time in which the page runs: a tick each second, and one at its end. */
  pass(seconds: number): void {
    for (let left = seconds; left > 1e-9; left -= 1) {
      const step = Math.min(1, left);
      this.monotonic += step;
      this.wallMs += step * 1000;
      this.tick?.();
    }
  }

  /** Time in which nothing on the page runs, as when the system holds it. */
  freeze(seconds: number): void {
    this.monotonic += seconds;
    this.wallMs += seconds * 1000;
  }

  /** Somebody sets the phone's clock. */
  setClock(byMs: number): void {
    this.wallMs += byMs;
  }

  /** The page goes away, and another one opens after so many seconds by the phone's clock. */
  async reload(seconds: number): Promise<void> {
    await rested();
    this.device.close();
    await rested();
    this.wallMs += seconds * 1000;
    this.monotonic = 7;
    this.device = this.made();
    await this.device.open();
  }
}
