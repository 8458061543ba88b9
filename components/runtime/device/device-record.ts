// The simulated stimulator's record: what it measured and did, in memory and safely written. Only what is written is given out, so
// that nothing is told to a server that a crash could make different. A full disk must not touch the current.

import type { Sample } from '@/shared/rules/delivered';
import type { DeviceStore, KeptState } from './device-state';
import type { Written } from './measure';
import type { DeviceEntry, DeviceRecord } from './stimulator';

export class RecordKeeper {
  private entries: DeviceEntry[] = [];
  samples: Sample[] = [];
  private sessionId: string | null = null;
  private kept = { entries: 0, samples: 0 };
  private writing: Promise<void> = Promise.resolve();
  isKept = true;

  constructor(
    private readonly store: DeviceStore,
    private readonly afterWriting: () => void,
  ) {}

  takeUp(sessionId: string, entries: DeviceEntry[], samples: Sample[]): void {
    this.sessionId = sessionId;
    this.entries = entries;
    this.samples = samples;
    this.kept = { entries: entries.length, samples: samples.length };
  }

  /** Written in one piece with the state; one write after the other. */
  keep(state: KeptState, written: Written): Promise<void> {
    this.entries.push(...written.entries);
    this.samples.push(...written.samples);
    const copy = structuredClone(state);
    const { sessionId } = this;
    const upTo = { entries: this.entries.length, samples: this.samples.length };
    const write = async () => {
      try {
        await this.store.write(copy, written.entries, written.samples);
        this.isKept = true;
      } catch {
        // It stays in memory and is given out from there; the status says so, and nothing new starts.
        this.isKept = false;
      }
      if (this.sessionId === sessionId) this.kept = upTo;
      this.afterWriting();
    };
    this.writing = this.writing.then(write);
    return this.writing;
  }

  read(sessionId: string, from: { entry: number; sample: number }): DeviceRecord {
    if (this.sessionId !== sessionId) return { entries: [], samples: [] };
    return {
      entries: this.entries.slice(from.entry, this.kept.entries),
      samples: this.samples.slice(from.sample, this.kept.samples),
    };
  }

  close(): void {
    void this.writing.then(() => this.store.close());
  }
}
