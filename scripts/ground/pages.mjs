// What: finishes the exported pages: starts the usual first chunks early, writes the service worker, compresses once.
// Must not: change what a page does.
import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { promisify } from 'node:util';
import { brotliCompress, constants, gzip } from 'node:zlib';

// The chunk of a route is asked for only after the entry has run. These are needed on nearly every first visit: by somebody
// who signs in, and by a participant who opens the page again.
const firstRoutes = [
  './_layout.tsx',
  './index.tsx',
  './(public)/_layout.tsx',
  './(public)/sign-in.tsx',
  './(participant)/_layout.tsx',
  './(participant)/today.tsx',
];
const worthCompressing = /\.(js|css|html|json|svg|ttf|txt|webmanifest)$/;
const neverServed = /(\.map|\.br|\.gz|^\/metadata\.json|^\/sw\.js)$/;

function list(folder) {
  return readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile())
    .map((entry) => path.join(entry.parentPath ?? entry.path, entry.name))
    .sort();
}

/**
 * Address of each route's chunk. Chunks are named by file name alone, so three of them are called `_layout`; which is which
 * stands in the entry: a table of routes (`"./today.tsx":{…(d[7],d.paths)}`), then what d holds (`{"7":812,…,"paths":{"812":"/…"}}`).
 */
function chunksOfRoutes(entry) {
  const chunks = new Map();
  const routes = [...entry.matchAll(/"(\.\/[^"]+)":\{enumerable:!0,get:\(\)=>r\(d\[\d+\]\)\(d\[(\d+)\],d\.paths\)/g)];
  if (routes.length === 0) return chunks;
  const after = entry.slice(routes.at(-1).index);
  const table = after.match(/\{"0":\d+(?:,"\d+":\d+)*,"paths":\{[^}]*\}\}/);
  if (!table) return chunks;
  const { paths, ...modules } = JSON.parse(table[0]);
  for (const [, route, number] of routes) chunks.set(route, paths[modules[number]]);
  return chunks;
}

function addPreloads(folder) {
  const page = path.join(folder, 'index.html');
  const entry = list(folder).find((file) => /entry-[0-9a-f]+\.js$/.test(file));
  const chunks = chunksOfRoutes(readFileSync(entry, 'utf8'));
  const links = [...new Set(firstRoutes.map((route) => chunks.get(route)).filter(Boolean))].map(
    (address) => `<link rel="preload" as="script" href="${address}">`,
  );
  // Without them the pages work and come a round trip later; but then the bundler's output has changed and this must follow.
  if (links.length === 0) console.warn('Pages: no chunk of a first route was found; nothing is loaded ahead.');
  writeFileSync(page, readFileSync(page, 'utf8').replace('</head>', `${links.join('')}</head>`));
}

function writeServiceWorker(folder) {
  const files = list(folder)
    .map((file) => `/${path.relative(folder, file)}`)
    .filter((file) => !neverServed.test(file));
  const source = readFileSync(path.join(import.meta.dirname, 'service-worker.js'), 'utf8');
  const version = createHash('sha256').update(source);
  for (const file of files) version.update(file).update(readFileSync(path.join(folder, file)));
  const filled = source
    .replace('__VERSION__', version.digest('hex').slice(0, 16))
    .replace('__FILES__', JSON.stringify(files));
  writeFileSync(path.join(folder, 'sw.js'), filled);
}

async function compress(folder, before) {
  const best = { params: { [constants.BROTLI_PARAM_QUALITY]: constants.BROTLI_MAX_QUALITY } };
  const one = async (file) => {
    const content = readFileSync(file);
    const old = path.join(before, path.relative(folder, file));
    // The best Brotli takes seconds; a file that did not change since the last build keeps what was made then.
    const same = existsSync(`${old}.br`) && existsSync(`${old}.gz`) && readFileSync(old).equals(content);
    writeFileSync(`${file}.br`, same ? readFileSync(`${old}.br`) : await promisify(brotliCompress)(content, best));
    writeFileSync(`${file}.gz`, same ? readFileSync(`${old}.gz`) : await promisify(gzip)(content, { level: 9 }));
  };
  await Promise.all(
    list(folder)
      .filter((file) => worthCompressing.test(file))
      .map(one),
  );
}

export async function finishPages(folder, before) {
  addPreloads(folder);
  writeServiceWorker(folder);
  await compress(folder, before);
}
