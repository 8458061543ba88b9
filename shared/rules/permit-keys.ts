// Which key signs permits and which keys a stimulator still trusts, after a change of keys. Holds no key.

import { minuteMilliseconds } from '@/shared/values/units';
import { parseInstant } from '@/shared/values/zone';
import { permitLifeMinutes } from './permit';

export interface DatedKey {
  readonly kid: string;
  readonly createdAt: string;
  /** Set when it was withdrawn: nothing that it signed is trusted from then on. */
  readonly closedAt: string | null;
}

/** The newest that was not withdrawn. `keys` from old to new. */
export function keyInUse<T extends DatedKey>(keys: readonly T[]): T | undefined {
  return keys.findLast((key) => key.closedAt === null);
}

/**
 * The one in use, and each before it until the last permit that it may have signed is over. Nothing is trusted that was withdrawn,
 * and no older key when the time is not known.
 */
export function trustedKeys<T extends DatedKey>(keys: readonly T[], now: string): T[] {
  const instant = parseInstant(now) ?? Number.POSITIVE_INFINITY;
  const open = keys.filter((key) => key.closedAt === null);
  return open.filter((_key, index) => {
    const next = open[index + 1];
    if (next === undefined) return true;
    const followedAt = parseInstant(next.createdAt) ?? Number.NEGATIVE_INFINITY;
    return instant < followedAt + permitLifeMinutes * minuteMilliseconds;
  });
}
