// How often somebody may knock at the doors that are worth guessing at. Counted in the database, so for all processes together.

import { createHash } from 'node:crypto';
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible';
import type { Client } from '@/db/client';

const minuteSeconds = 60;
const hourSeconds = 60 * minuteSeconds;

/** Own choices: far above what people need, far below what guessing needs. */
const kinds = {
  /** Tries to sign in for one address of mail. */
  sign_in: { points: 10, duration: 15 * minuteSeconds },
  /** Tries to sign in from one network address. */
  sign_in_network: { points: 100, duration: hourSeconds },
  /** Passwords typed again, wrongly, by one account. */
  confirm: { points: 5, duration: 15 * minuteSeconds },
  /** Links of invitations and mail stops tried from one network address. */
  link: { points: 60, duration: hourSeconds },
  /** Mails for a new password to one address. */
  reset: { points: 3, duration: hourSeconds },
  reset_network: { points: 20, duration: hourSeconds },
  /** Requests for permits by one account; permits issued have a limit of their own in the rules. */
  permit: { points: 60, duration: minuteSeconds },
} as const;

export type LimitKind = keyof typeof kinds;

export interface Limits {
  /** Counts one knock. Seconds to wait when it was one too many, else null. */
  count(kind: LimitKind, key: string): Promise<number | null>;
  /** Seconds to wait when there were too many before; counts nothing. */
  waitOf(kind: LimitKind, key: string): Promise<number | null>;
  forget(kind: LimitKind, key: string): Promise<void>;
}

const unlimited: Limits = {
  count: async () => null,
  waitOf: async () => null,
  forget: async () => undefined,
};

export function makeLimits(client: Client, isOn: boolean): Limits {
  if (!isOn) return unlimited;
  const limiterOf = (kind: LimitKind) =>
    new RateLimiterPostgres({
      storeClient: client.pool,
      tableName: 'rate_limit',
      tableCreated: true,
      keyPrefix: kind,
      clearExpiredByTimeout: true,
      ...kinds[kind],
    });
  const limiters: Record<LimitKind, RateLimiterPostgres> = {
    sign_in: limiterOf('sign_in'),
    sign_in_network: limiterOf('sign_in_network'),
    confirm: limiterOf('confirm'),
    link: limiterOf('link'),
    reset: limiterOf('reset'),
    reset_network: limiterOf('reset_network'),
    permit: limiterOf('permit'),
  };
  return {
    async count(kind, key) {
      try {
        await limiters[kind].consume(shortOf(key));
        return null;
      } catch (error) {
        if (error instanceof RateLimiterRes) return secondsOf(error);
        throw error;
      }
    },
    async waitOf(kind, key) {
      const found = await limiters[kind].get(shortOf(key));
      return found && found.consumedPoints >= kinds[kind].points ? secondsOf(found) : null;
    },
    async forget(kind, key) {
      await limiters[kind].delete(shortOf(key));
    },
  };
}

/** Addresses of mail are longer than the table's key, and no business of whoever reads that table. */
function shortOf(key: string): string {
  return createHash('sha256').update(key).digest('base64url');
}

function secondsOf({ msBeforeNext }: RateLimiterRes): number {
  return Math.max(1, Math.ceil(msBeforeNext / 1000));
}
