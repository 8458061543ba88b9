// What: the mutation score of the rules that decide: dose, clearance, lockout, permit, schedule. It takes long: Stryker tries each change.
// Must not: count what no test reaches as killed, or leave out a mutant but those of a type that cannot be built.
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { root, workFolder } from '../ground/paths.mjs';
import { run } from '../ground/processes.mjs';

export const what = 'mutation score of dose, clearance, lockout, permit and schedule';

export const mutated = [
  ...[
    'dose.ts',
    'dose/*.ts',
    'site-limits.ts',
    'clearance.ts',
    'clearance/*.ts',
    'known.ts',
    'lockout.ts',
    'permit.ts',
  ],
  ...['schedule.ts', 'hours.ts', 'rolling.ts', 'hold.ts'],
].map((file) => `shared/rules/${file}`);

/** Share of the tried changes that a test notices, in percent. */
export function scoreOf(report) {
  const states = Object.values(report.files).flatMap(({ mutants }) => mutants.map(({ status }) => status));
  const count = (...wanted) => states.filter((status) => wanted.includes(status)).length;
  const killed = count('Killed', 'Timeout');
  const alive = count('Survived', 'NoCoverage');
  return { killed, alive, score: (100 * killed) / (killed + alive) };
}

export default async () => {
  const stryker = path.join(root, 'node_modules', '.bin', 'stryker');
  // Below the floor it ends with 1; the report says by how much.
  await run(stryker, ['run', 'scripts/mutants/stryker.config.mjs', '-m', mutated.join(',')], {
    cwd: root,
    stdio: ['ignore', 'ignore', 'inherit'],
  }).catch(() => undefined);
  const { killed, alive, score } = scoreOf(
    JSON.parse(readFileSync(path.join(workFolder, 'mutants', 'report.json'), 'utf8')),
  );
  const value = Math.round(score * 100) / 100;
  return { value, floor: 85, goal: 95, best: 100, unit: '%', pass: value >= 85, killed, alive };
};
