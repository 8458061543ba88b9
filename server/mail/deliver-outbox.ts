// Sends what waits in the outbox: urgent first, each row at least once, several senders side by side. Outside any transaction of an
// action; a row that cannot be sent is tried again later, and one that is stale is dropped and says so.

import type { Client } from '@/db/client';
import { claimOutbox, closeOutbox, postponeOutbox, type OutboxRow } from '@/db/queries/house';
import { houseNow } from '@/server/clock';
import type { Env } from '@/server/env';
import { dayMilliseconds, hourMilliseconds, minuteMilliseconds } from '@/shared/values/units';
import { renderMail } from './render-mail';
import type { Transport } from './transport';

export interface Delivery {
  /** Sends everything that is due. Returns how many rows were closed. */
  deliverDue(): Promise<number>;
}

/** Own choices. */
const batch = 20;
/** A row in the hands of a sender that died is free again after this. */
const heldMilliseconds = 2 * minuteMilliseconds;
/** Waits after the first, second … failure; the last for all that follow. */
const waits = [minuteMilliseconds, 5 * minuteMilliseconds, 15 * minuteMilliseconds, hourMilliseconds];
/** A mail without an end of its own is given up after this. */
const longestMilliseconds = 7 * dayMilliseconds;
/** SMTP 550–554: this mailbox will not take it, however often (RFC 5321, 4.2.3). */
const refusedFor = (error: unknown) =>
  error instanceof Error && 'responseCode' in error && Number(error.responseCode) >= 550;

export function makeDelivery(
  client: Client,
  env: Pick<Env, 'isDemo' | 'baseUrl'>,
  transport: Transport | null,
  onFault: (error: unknown, key: string) => void,
): Delivery {
  const now = () => houseNow(client.db, env.isDemo);

  async function deliver(row: OutboxRow, { send }: Transport): Promise<boolean> {
    const at = await now();
    const isStale =
      row.dropAt !== null ? row.dropAt <= at : Date.parse(at) - Date.parse(row.createdAt) > longestMilliseconds;
    if (isStale) return close(row, 'dropped');
    try {
      await send(row.toEmail, renderMail(row, env.baseUrl), row.key);
      return await close(row, 'sent');
    } catch (error) {
      if (refusedFor(error)) return close(row, 'refused');
      onFault(error, row.key);
      const wait = waits[Math.min(row.attempts, waits.length) - 1] ?? minuteMilliseconds;
      await postponeOutbox(client.db, row.id, later(at, wait), error instanceof Error ? error.name : 'unknown');
      return false;
    }
  }

  async function close(row: OutboxRow, why: 'sent' | 'dropped' | 'refused'): Promise<boolean> {
    await closeOutbox(client.db, row.id, await now(), why);
    return true;
  }

  return {
    async deliverDue() {
      if (!transport) return 0;
      let closed = 0;
      for (;;) {
        const at = await now();
        const rows = await claimOutbox(client.db, at, later(at, heldMilliseconds), batch);
        for (const row of rows) if (await deliver(row, transport)) closed += 1;
        if (rows.length < batch) return closed;
      }
    },
  };
}

function later(instant: string, milliseconds: number): string {
  return new Date(Date.parse(instant) + milliseconds).toISOString();
}
