// Reads facts one by one and keeps the names of those that are missing. A fact that is there but cannot be meant
// (not a number, a negative amount, an instant that is none) is as good as missing. Decides nothing.

import { parseInstant } from '@/shared/values/zone';

export class Known {
  private readonly names: string[] = [];

  /** Names of missing facts in the order of asking, each with the highest missing step of its path only. */
  get missing(): readonly string[] {
    return this.names;
  }

  private miss(name: string): undefined {
    const told = this.names.some((known) => known === name || name.startsWith(`${known}.`));
    if (!told) this.names.push(name);
    return undefined;
  }

  /** Any fact that is there; null is a value. */
  some<T>(name: string, value: T | undefined): T | undefined {
    return value === undefined ? this.miss(name) : value;
  }

  /** An amount or a count: finite and not negative. */
  amount(name: string, value: number | undefined): number | undefined {
    return value !== undefined && Number.isFinite(value) && value >= 0 ? value : this.miss(name);
  }

  flag(name: string, value: boolean | undefined): boolean | undefined {
    return typeof value === 'boolean' ? value : this.miss(name);
  }

  text(name: string, value: string | undefined): string | undefined {
    return typeof value === 'string' && value !== '' ? value : this.miss(name);
  }

  /** One of the words that the rules know. */
  word<T extends string>(name: string, value: T | undefined, words: readonly T[]): T | undefined {
    return value !== undefined && words.includes(value) ? value : this.miss(name);
  }

  /** Milliseconds of an instant in UTC. */
  instant(name: string, value: string | undefined): number | undefined {
    return parseInstant(value) ?? this.miss(name);
  }
}
