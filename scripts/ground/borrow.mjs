// What: lends parts of the server to a script: bundled like the server is, loaded into this process. Needs the packages installed.
// Must not: start anything.
import { mkdirSync, rmSync } from 'node:fs';
import { createRequire } from 'node:module';
import path from 'node:path';
import { root, workFolder } from './paths.mjs';

/** @param modules paths without ending from the root; what they export comes back together */
export async function borrow(...modules) {
  const { build } = await import('esbuild');
  const outfile = path.join(workFolder, `borrowed-${process.pid}.cjs`);
  mkdirSync(workFolder, { recursive: true });
  await build({
    absWorkingDir: root,
    stdin: { contents: modules.map((name) => `export * from './${name}';`).join('\n'), resolveDir: root, loader: 'ts' },
    outfile,
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'cjs',
    external: ['sharp', 'pg-native'],
    logLevel: 'error',
  });
  try {
    return createRequire(import.meta.url)(outfile);
  } finally {
    rmSync(outfile, { force: true });
  }
}
