// The table of jobs: what is due runs, at its time, once, and one that fails holds nobody up.
import type { Job } from '@/server/action';
import { makeRunner } from '@/server/jobs';
import { openClinic, type Clinic } from '../support/clinic';

let clinic: Clinic;
beforeEach(async () => {
  clinic = await openClinic();
});
afterEach(() => clinic.close());

const noMails = { deliverDue: async () => 0 };

/** Work that is due at given instants and notes when it ran, by the house's clock. */
function work(name: string, dues: string[], ran: [string, string][], fails = false): Job {
  const left = new Set(dues);
  return {
    name,
    listDue: async (_db, now) => [...left].filter((due) => due <= now),
    nextDue: async () => [...left].sort()[0] ?? null,
    async run(id, tx) {
      if (fails) throw new Error('on purpose');
      left.delete(id);
      ran.push([id, await tx.now()]);
    },
  };
}

const after = (instant: string, seconds: number) => new Date(Date.parse(instant) + seconds * 1000).toISOString();

it('does each thing at its time when the clock is moved past it', async () => {
  const start = await clinic.now();
  const dues = [after(start, 3600), after(start, 7200), after(start, 86_400)];
  const ran: [string, string][] = [];
  const runner = makeRunner(clinic.transact, noMails, () => undefined, [work('a', dues, ran)]);
  const { now, jobsRun } = await runner.moveClock(90_000);
  expect(jobsRun).toBe(3);
  expect(ran.map(([due]) => due)).toEqual(dues);
  for (const [due, at] of ran) expect(Date.parse(at) - Date.parse(due)).toBeLessThan(30_000);
  expect(Date.parse(now) - Date.parse(start)).toBeGreaterThanOrEqual(90_000_000);
});

it('goes on with the others when one job fails, and ends', async () => {
  const start = await clinic.now();
  const ran: [string, string][] = [];
  const faults: string[] = [];
  const table = [work('bad', [start], [], true), work('good', [start, after(start, 5400)], ran)];
  const runner = makeRunner(clinic.transact, noMails, (_error, job) => faults.push(job), table);
  await runner.moveClock(7200);
  expect(ran.map(([due]) => due)).toEqual([start, after(start, 5400)]);
  expect(new Set(faults)).toEqual(new Set(['bad']));
});

it('lets one of two processes do what both see', async () => {
  const start = await clinic.now();
  let running = 0;
  let most = 0;
  let done = false;
  const slow: Job = {
    name: 'slow',
    listDue: async () => (done ? [] : ['one']),
    nextDue: async () => (done ? null : start),
    async run(_id, tx) {
      running += 1;
      most = Math.max(most, running);
      await tx.db.execute('select pg_sleep(0.3)');
      running -= 1;
      done = true;
    },
  };
  const runners = [1, 2].map(() => makeRunner(clinic.transact, noMails, () => undefined, [slow]));
  const counts = await Promise.all(runners.map((runner) => runner.runDue()));
  expect(most).toBe(1);
  expect(counts.sort()).toEqual([0, 1]);
});
