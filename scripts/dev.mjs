// What: `npm run dev`: the same database as `npm start`, the server again on every change, the pages reloading by
// themselves; all at one address. Must not: build anything, or be used for more than development.
import { request, createServer } from 'node:http';
import { connect } from 'node:net';
import path from 'node:path';
import { openDatabase } from './ground/database.mjs';
import { checkNode, installPackages } from './ground/install.mjs';
import { root, workFolder } from './ground/paths.mjs';
import { beforeEnd, freePort, isPortFree, main, Plainly, start, stopChild } from './ground/processes.mjs';
import { launchServer, untilReady } from './ground/server.mjs';

const host = process.env.HOST || '127.0.0.1';
const port = Number(process.env.PORT || 8080);

/** One address in front of both, as in production, so that cookies and the origin check are the same. */
function openFront(serverPort, pagesPort) {
  const behind = (url) => ({ host: '127.0.0.1', port: url.startsWith('/api/') ? serverPort : pagesPort });
  const front = createServer((incoming, outgoing) => {
    const passed = request({
      ...behind(incoming.url),
      method: incoming.method,
      path: incoming.url,
      headers: incoming.headers,
    });
    passed.on('response', (answer) => answer.pipe(outgoing.writeHead(answer.statusCode, answer.rawHeaders)));
    passed.on('error', () => outgoing.writeHead(503, { 'retry-after': '1' }).end('Starting again, one moment.'));
    incoming.pipe(passed);
  });
  // Metro tells the page about changes over a web socket.
  front.on('upgrade', (incoming, socket, head) => {
    const passed = connect(behind(incoming.url), () => {
      const headers = incoming.rawHeaders.map((word, index) => (index % 2 ? `${word}\r\n` : `${word}: `)).join('');
      passed.write(`${incoming.method} ${incoming.url} HTTP/1.1\r\n${headers}\r\n`);
      passed.write(head);
      passed.pipe(socket).pipe(passed);
    });
    for (const end of [socket, passed]) end.on('error', () => (socket.destroy(), passed.destroy()));
  });
  return new Promise((resolve) => front.listen(port, host, resolve));
}

function startPages(pagesPort) {
  const expo = path.join(root, 'node_modules', 'expo', 'bin', 'cli');
  // Our tsconfig.json is ours: Expo would write it anew in its own way.
  const quiet = { EXPO_OFFLINE: '1', EXPO_NO_TELEMETRY: '1', EXPO_NO_TYPESCRIPT_SETUP: '1', BROWSER: 'none' };
  const env = { ...process.env, ...quiet, NODE_ENV: 'development' };
  delete env.CI; // With it Metro does not watch.
  const child = start(process.execPath, [expo, 'start', '--port', String(pagesPort)], { cwd: root, env });
  beforeEnd(() => stopChild(child));
  return new Promise((_, reject) => child.once('exit', () => reject(new Plainly('The bundler of the pages ended.'))));
}

await main(async () => {
  checkNode();
  if (!(await isPortFree(port, host)))
    throw new Plainly(`Port ${port} is in use. Choose another one: PORT=${port + 1} npm run dev`);
  await installPackages(console.log);
  const databaseUrl = await openDatabase({ reset: process.argv.includes('--reset'), say: console.log });
  const serverPort = await freePort();
  const pagesPort = await freePort();
  const address = `http://${host}:${port}`;
  const { ended } = launchServer(
    {
      DATABASE_URL: databaseUrl,
      HOST: '127.0.0.1',
      PORT: String(serverPort),
      BASE_URL: address,
      DEMO: process.env.DEMO ?? '1',
      RAMPWELL_DATA: process.env.RAMPWELL_DATA ?? workFolder,
      NODE_ENV: 'development',
    },
    {
      command: [
        ...[
          process.execPath,
          path.join(root, 'node_modules', 'tsx', 'dist', 'cli.mjs'),
          'watch',
          '--clear-screen=false',
        ],
        ...['--include', 'db/migrations/**', '--include', 'locales/**', 'server/main.ts'],
      ],
    },
  );
  const pagesEnded = startPages(pagesPort);
  await openFront(serverPort, pagesPort);
  await Promise.race([untilReady(address, ended), pagesEnded]);
  console.log(`Rampwell is ready for changes: ${address}`);
  await Promise.race([ended, pagesEnded]);
});
