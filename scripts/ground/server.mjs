// What: runs the bundled server as a child and tells when it is ready. Must not: decide anything the server decides.
import { appendFileSync, renameSync, rmSync, statSync } from 'node:fs';
import path from 'node:path';
import { createInterface } from 'node:readline';
import { setTimeout as pause } from 'node:timers/promises';
import { root, serverBundle, workFolder } from './paths.mjs';
import { beforeEnd, isStopping, Plainly, start, stopChild } from './processes.mjs';

const log = path.join(workFolder, 'server.log');
const largestLogBytes = 10_000_000;

/** The server writes progress for people as plain lines and its log as JSON lines; the log goes to a file, except faults. */
function forward(line) {
  if (!line.startsWith('{')) return console.log(line);
  appendFileSync(log, `${line}\n`);
  try {
    const { level, msg, err } = JSON.parse(line);
    if (level >= 50) console.error(`Fault: ${msg ?? ''}${err?.message ? ` (${err.message})` : ''}. More in ${log}`);
  } catch {
    console.log(line);
  }
}

function keepLogSmall() {
  try {
    if (statSync(log).size > largestLogBytes) {
      rmSync(`${log}.old`, { force: true });
      renameSync(log, `${log}.old`);
    }
  } catch {
    // No log yet.
  }
}

/** Starts the server; whatever ends it ends this program too. */
export function launchServer(env, { command = [process.execPath, '--enable-source-maps', serverBundle] } = {}) {
  keepLogSmall();
  const [program, ...args] = command;
  // Out of reach of the terminal's Ctrl-C: it would hear it twice, from the terminal and from us, and end at once.
  const child = start(program, args, {
    ...{ cwd: root, stdio: ['ignore', 'pipe', 'inherit'], env: { ...process.env, ...env }, detached: true },
  });
  createInterface({ input: child.stdout }).on('line', forward);
  beforeEnd(() => stopChild(child));
  const ended = new Promise((_, reject) => {
    child.once('error', reject);
    child.once('exit', (code, signal) => {
      if (!isStopping()) reject(new Plainly(`The server ended (${signal ?? `code ${code}`}). Its log: ${log}`));
    });
  });
  // Nobody may be waiting for it yet when it ends; whoever asks later is told.
  ended.catch(() => undefined);
  return { child, ended };
}

/** Resolves when the server answers that it can serve; there is no time limit, because the first start fills the demo. */
export async function untilReady(address, ended) {
  const ask = async () => {
    while (!isStopping()) {
      const answer = await fetch(`${address}/api/health`).catch(() => undefined);
      await answer?.body?.cancel();
      if (answer?.status === 200) return;
      await pause(100);
    }
  };
  await Promise.race([ask(), ended]);
}
