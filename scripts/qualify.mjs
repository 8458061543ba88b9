// What: `npm run --silent qualify -- FILE.json …` runs worked cases against the rules that the server decides with (shared/rules/qualify.ts).
// One JSON line a case on standard output, `N passed, N failed` as the last; what was not understood is said on standard error.
// Must not: judge anything itself, or need a database, a build or a network.
import { readFileSync } from 'node:fs';
import { checkNode, installPackages } from './ground/install.mjs';
import { root } from './ground/paths.mjs';
import { end, main, Plainly } from './ground/processes.mjs';

const usage = `Name at least one file of worked cases: npm run --silent qualify -- FILE.json …
A file holds JSON in one of the forms that DEVELOPERS.md ("Qualification") describes.`;
const form =
  'A file is {"cases": […]} with rule cases (id, kind, given, expect; "baseline" beside them), scale cases (id, scale, answers or before and after, expect) or number cases (id, kind, input, expected, tolerance).';

/** The engine as it stands in the source, in one piece. */
async function loadEngine() {
  const bundler = await import('esbuild').catch(async () => {
    await installPackages(console.error);
    return import('esbuild');
  });
  const { outputFiles } = await bundler.build({
    absWorkingDir: root,
    entryPoints: ['shared/rules/qualify.ts'],
    bundle: true,
    write: false,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    logLevel: 'error',
  });
  return import(`data:text/javascript;base64,${Buffer.from(outputFiles[0].contents).toString('base64')}`);
}

function readJson(file) {
  let text;
  try {
    text = readFileSync(file, 'utf8');
  } catch (error) {
    const why =
      error.code === 'ENOENT' ? 'it is not there' : error.code === 'EISDIR' ? 'it is a folder' : error.message;
    throw new Plainly(`${file} cannot be read: ${why}. Give the path of a JSON file.`);
  }
  try {
    return JSON.parse(text.replace(/^\uFEFF/, ''));
  } catch (error) {
    throw new Plainly(`${file} is not JSON: ${error.message}. ${form}`);
  }
}

/** Results of one file, each printed as it comes. A file that cannot be used counts as one that failed. */
function runFile({ readCaseFile, runCase }, file) {
  try {
    const read = readCaseFile(readJson(file));
    if (!read.read)
      throw new Plainly(`${file} does not have the form of worked cases: ${read.problems.join('; ')}. ${form}`);
    return read.cases.map((each) => {
      const result = runCase(each);
      console.log(JSON.stringify(result));
      if (result.error) console.error(`${file}: case ${result.id}: ${result.error.join('; ')}`);
      return result;
    });
  } catch (error) {
    if (!(error instanceof Plainly)) throw error;
    console.error(error.message);
    return [{ pass: false }];
  }
}

await main(async () => {
  checkNode();
  const files = process.argv.slice(2);
  if (files.length === 0) throw new Plainly(usage);
  const engine = await loadEngine();
  const { passed, failed } = engine.tally(files.flatMap((file) => runFile(engine, file)));
  console.log(`${passed} passed, ${failed} failed`);
  await end(failed > 0 ? 1 : 0);
});
