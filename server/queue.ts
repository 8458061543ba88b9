// The queue only wakes: what there is to do stands in tables (outbox, windows, permits). A lost wake costs a minute, never a mail.

import PgBoss from 'pg-boss';
import type { Execute } from '@/db/client';

export interface Queue {
  /** Begins to run `work` whenever something wakes it, and once a minute. */
  work(work: () => Promise<void>): Promise<void>;
  /** Asks for a run; with a transaction's own connection the wish is undone with it. */
  wake(execute: Execute): Promise<void>;
  stop(graceMilliseconds: number): Promise<void>;
}

const name = 'wake';
/** How long a wake may lie there before it is taken (own choice): mails leave within it. */
const pollSeconds = 1;
/** A run that takes longer counts as dead, and another one begins; jobs bear being run twice (own choice). */
const longestRunSeconds = 600;

export async function openQueue(databaseUrl: string, onError: (error: Error) => void): Promise<Queue> {
  const boss = new PgBoss({
    connectionString: databaseUrl,
    schema: 'pgboss',
    application_name: 'rampwell-queue',
    max: 3,
  });
  boss.on('error', onError);
  await boss.start();
  // `short`: at most one wake waits, however many ask.
  await boss.createQueue(name, { name, policy: 'short', retryLimit: 0, expireInSeconds: longestRunSeconds });
  return {
    async work(work) {
      await boss.work(name, { pollingIntervalSeconds: pollSeconds, batchSize: 1 }, work);
      await boss.schedule(name, '* * * * *');
      // What came due while nothing ran does not wait for the full minute.
      await boss.send(name, {});
    },
    async wake(execute) {
      await boss.send(name, {}, { db: { executeSql: (text, values) => execute(text, values) } });
    },
    stop: (graceMilliseconds) => boss.stop({ graceful: true, wait: true, close: true, timeout: graceMilliseconds }),
  };
}
