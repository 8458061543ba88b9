// What: one hash over files, so that a build whose inputs did not change can be left out.
// Must not: look at times or sizes; a fresh clone of the same commit has other times and needs the same answer.
import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { root } from './paths.mjs';

function* filesIn(place) {
  if (!existsSync(place)) return;
  if (statSync(place).isFile()) return yield place;
  for (const entry of readdirSync(place, { withFileTypes: true }).sort((a, b) => (a.name < b.name ? -1 : 1))) {
    const inner = path.join(place, entry.name);
    if (entry.isDirectory()) yield* filesIn(inner);
    else if (entry.isFile()) yield inner;
  }
}

export function hashOf(places) {
  const hash = createHash('sha256');
  for (const place of places) {
    for (const file of filesIn(path.join(root, place))) {
      hash.update(path.relative(root, file)).update('\0').update(readFileSync(file)).update('\0');
    }
  }
  return hash.digest('hex');
}

/** Runs `work` unless `stamp` says that it ended well with these very inputs and its result is still there. */
export async function unlessUnchanged({ inputs, stamp, result }, work) {
  const hash = hashOf(inputs);
  if (existsSync(result) && existsSync(stamp) && readFileSync(stamp, 'utf8') === hash) return false;
  await work();
  writeFileSync(stamp, hash);
  return true;
}
