// What: makes what runs: the server as one file (.rampwell/server.cjs) and the pages (dist/). Each is left out when none of
// its inputs changed. `node scripts/build.mjs server` or `… web` makes one of them. Must not: fetch anything.
import { mkdirSync, renameSync, rmSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { checkNode, installPackages } from './ground/install.mjs';
import { unlessUnchanged } from './ground/inputs.mjs';
import { inTurn } from './ground/lock.mjs';
import { root, serverBundle, webFolder, workFolder } from './ground/paths.mjs';
import { main, run } from './ground/processes.mjs';
import { finishPages } from './ground/pages.mjs';

const settings = ['package.json', 'package-lock.json', 'tsconfig.json', 'scripts/build.mjs'];
const serverInputs = [...settings, 'server', 'db', 'shared', 'locales'];
const webInputs = [
  ...settings,
  ...[
    'app',
    'components',
    'shared',
    'locales',
    'assets',
    'public',
    'scripts/ground/pages.mjs',
    'scripts/ground/service-worker.js',
  ],
  ...['app.json', 'metro.config.js', 'babel.config.js'],
];

/** One build of a kind at a time, and none when nothing changed since the last. */
function once(name, { inputs, result }, work) {
  mkdirSync(workFolder, { recursive: true });
  return inTurn(`${name}.building`, () =>
    unlessUnchanged({ inputs, result, stamp: path.join(workFolder, `${name}.inputs`) }, work),
  );
}

export async function buildServer(say) {
  return once('server', { inputs: serverInputs, result: serverBundle }, async () => {
    say('Server: bundling');
    const { build } = await import('esbuild');
    await build({
      absWorkingDir: root,
      entryPoints: ['server/main.ts'],
      outfile: serverBundle,
      bundle: true,
      platform: 'node',
      target: 'node20',
      format: 'cjs',
      sourcemap: 'linked',
      sourcesContent: false,
      logLevel: 'error',
      // One file starts in a third of the time that the many files of the libraries take. sharp holds a compiled part and
      // stays where it is; pg asks for pg-native only if somebody installed it.
      external: ['sharp', 'pg-native'],
    });
  });
}

export async function buildWeb(say) {
  return once('web', { inputs: webInputs, result: path.join(webFolder, 'sw.js') }, async () => {
    say('Pages: building');
    // Built beside its place and moved when whole, so that a server that is running never serves half of it.
    const fresh = path.join(workFolder, 'dist.new');
    rmSync(fresh, { recursive: true, force: true });
    const expo = path.join(root, 'node_modules', 'expo', 'bin', 'cli');
    await run(process.execPath, [expo, 'export', '--platform', 'web', '--output-dir', fresh], {
      cwd: root,
      quiet: true,
      // No telemetry and no look-ups at Expo's servers: the build must work without a network.
      env: { ...process.env, EXPO_OFFLINE: '1', EXPO_NO_TELEMETRY: '1', CI: '1', NODE_ENV: 'production' },
    });
    await finishPages(fresh, webFolder);
    rmSync(webFolder, { recursive: true, force: true });
    renameSync(fresh, webFolder);
  });
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  // Not awaited: Jest's set-up loads this file by `require`, which cannot wait.
  void main(async () => {
    checkNode();
    await installPackages(console.log);
    const which = process.argv[2];
    if (which !== 'web') await buildServer(console.log);
    if (which !== 'server') await buildWeb(console.log);
    process.exit(0);
  });
}
