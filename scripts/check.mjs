// What: `npm run check`: types, lint, arrows, words, one after the other, all of them even if one fails.
// Must not: check anything by itself; each check has its own script.
import { root } from './ground/paths.mjs';
import { end, main, run } from './ground/processes.mjs';

await main(async () => {
  const failed = [];
  for (const name of ['types', 'lint', 'arrows', 'words']) {
    await run('npm', ['run', '--silent', `check:${name}`], { cwd: root }).catch(() => failed.push(name));
  }
  console.log(
    failed.length > 0 ? `\nNot in order: ${failed.join(', ')}.` : '\nTypes, lint, arrows and words are in order.',
  );
  await end(failed.length > 0 ? 1 : 0);
});
