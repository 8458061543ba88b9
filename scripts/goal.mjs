// What: `npm run goal -- T4` measures one goal and prints one JSON line; `npm run goal -- --list` names them; `--seed N` repeats a run.
// One file a goal in scripts/goals/: a default export that is asked with the seed and answers with value, floor, goal, best, unit, pass.
// Must not: measure anything itself, or print more than its lines on standard output.
import { readdirSync } from 'node:fs';
import path from 'node:path';
import { parseArgs } from 'node:util';
import { root } from './ground/paths.mjs';
import { end, main, Plainly } from './ground/processes.mjs';

const folder = path.join(root, 'scripts', 'goals');
const ids = readdirSync(folder)
  .map((name) => /^([A-Z]\d+|[a-z]+)\.mjs$/.exec(name)?.[1])
  .filter((id) => id !== undefined)
  .sort((a, b) => a.localeCompare(b, 'en', { numeric: true }));

function chosenSeed(text) {
  if (text === undefined) return Math.floor(Math.random() * 2 ** 31);
  const seed = Number(text);
  if (!Number.isSafeInteger(seed)) throw new Plainly(`A seed is a whole number, not "${text}".`);
  return seed;
}

await main(async () => {
  const { values, positionals } = parseArgs({
    allowPositionals: true,
    options: { list: { type: 'boolean', default: false }, seed: { type: 'string' } },
  });
  if (values.list) {
    for (const id of ids) {
      const { what } = await import(path.join(folder, `${id}.mjs`));
      console.log(`${id.padEnd(5)}${what}`);
    }
    return end(0);
  }
  if (positionals.length === 0) throw new Plainly('Name a goal, or --list for all of them.');
  const seed = chosenSeed(values.seed);
  let isReached = true;
  for (const id of positionals) {
    if (!ids.includes(id)) throw new Plainly(`There is no goal "${id}". npm run goal -- --list names them.`);
    const { default: measure } = await import(path.join(folder, `${id}.mjs`));
    const { value, floor, goal, best, unit, pass, ...more } = await measure({ seed });
    console.log(JSON.stringify({ id, value, floor, goal, best, unit, seed, pass, ...more }));
    isReached = isReached && pass;
  }
  return end(isReached ? 0 : 1);
});
