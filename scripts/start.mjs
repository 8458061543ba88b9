// What: `npm start`. From a bare clone to an address that answers: packages, database, server, pages, demo; all stopped
// again by Ctrl-C. `npm start -- --reset` makes the demo anew. Must not: import anything that has to be installed first.
import { buildServer, buildWeb } from './build.mjs';
import { openDatabase } from './ground/database.mjs';
import { checkNode, installPackages } from './ground/install.mjs';
import { workFolder } from './ground/paths.mjs';
import { isPortFree, main, Plainly } from './ground/processes.mjs';
import { launchServer, untilReady } from './ground/server.mjs';

const say = console.log;
const host = process.env.HOST || '127.0.0.1';
const port = Number(process.env.PORT || 8080);
const isWorker = process.env.ROLE === 'worker';

async function checkAddress() {
  if (!Number.isInteger(port) || port < 1 || port > 65535)
    throw new Plainly(`PORT is "${process.env.PORT}"; it must be a number from 1 to 65535.`);
  const free = await isPortFree(port, host).catch((error) => {
    throw new Plainly(`The server cannot listen on ${host}:${port} (${error.code}). Choose another HOST or PORT.`);
  });
  if (!free) throw new Plainly(`Port ${port} on ${host} is in use. Choose another one: PORT=${port + 1} npm start`);
}

function browsable(name) {
  if (name === '0.0.0.0' || name === '::') return 'localhost';
  return name.includes(':') ? `[${name}]` : name;
}

await main(async () => {
  checkNode();
  if (isWorker && !process.env.DATABASE_URL)
    throw new Plainly('ROLE=worker runs jobs for a server that is up: give it the same DATABASE_URL.');
  if (!isWorker) await checkAddress();
  await installPackages(say);

  const reset = process.argv.includes('--reset');
  // The demo is filled and the pages are built side by side: the server serves whatever pages lie there when it is asked.
  const pages = isWorker ? undefined : buildWeb(say);
  pages?.catch(() => undefined);
  const [databaseUrl] = await Promise.all([openDatabase({ reset, say }), buildServer(say)]);
  const { ended } = launchServer({
    DATABASE_URL: databaseUrl,
    HOST: host,
    PORT: String(port),
    DEMO: process.env.DEMO ?? '1',
    RAMPWELL_DATA: process.env.RAMPWELL_DATA ?? workFolder,
    NODE_ENV: 'production',
  });
  if (!isWorker) {
    const address = `http://${browsable(host)}:${port}`;
    await Promise.all([untilReady(address, ended), pages]);
    say(`Rampwell is ready: ${address}`);
  }
  await ended;
});
