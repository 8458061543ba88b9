// What: starts other programs, remembers them, and stops them all when this one is asked to stop.
// Must not: leave a child behind, or end one that it did not start.
import { spawn } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { setTimeout as pause } from 'node:timers/promises';

/** A failure whose text is meant for the person at the terminal: shown as it is, without a stack. */
export class Plainly extends Error {}

const children = new Set();
const closers = [];
let stopping = false;

/** Starts a program. `quiet` keeps its output back and shows it only if it fails. */
export function start(command, args, { quiet = false, stdio, ...options } = {}) {
  const child = spawn(command, args, {
    stdio: stdio ?? ['ignore', quiet ? 'pipe' : 'inherit', quiet ? 'pipe' : 'inherit'],
    ...options,
  });
  children.add(child);
  child.once('exit', () => children.delete(child));
  child.once('error', () => children.delete(child));
  return child;
}

/** Runs a program to its end; answers with what it wrote when `quiet`. */
export function run(command, args, options = {}) {
  return new Promise((resolve, reject) => {
    const child = start(command, args, options);
    let output = '';
    child.stdout?.on('data', (chunk) => (output += chunk));
    child.stderr?.on('data', (chunk) => (output += chunk));
    child.once('error', reject);
    child.once('close', (code, signal) => {
      if (code === 0) resolve(output);
      else
        reject(
          new Plainly(`${output}\n\`${[command, ...args].join(' ')}\` ended with ${signal ?? `code ${code}`}.`.trim()),
        );
    });
  });
}

/** What must be done before this program may end, last one first (the server before its database). */
export function beforeEnd(closer) {
  closers.push(closer);
}

export function isStopping() {
  return stopping;
}

/** Asks a child to stop, and insists after ten seconds (own choice: a request in hand takes less). */
export function stopChild(child, graceMilliseconds = 10_000) {
  if (child.exitCode !== null || child.signalCode !== null) return Promise.resolve();
  return new Promise((resolve) => {
    const insist = setTimeout(() => child.kill('SIGKILL'), graceMilliseconds);
    child.once('exit', () => {
      clearTimeout(insist);
      resolve();
    });
    child.kill('SIGTERM');
  });
}

/** Stops everything and ends. Safe to call twice: the second call does nothing. */
export async function end(code) {
  if (stopping) return;
  stopping = true;
  for (const closer of closers.reverse()) {
    try {
      await closer();
    } catch (error) {
      console.error(error instanceof Plainly ? error.message : error);
    }
  }
  await Promise.all([...children].map((child) => stopChild(child, 3_000)));
  process.exit(code);
}

/** The processes between us and npm: it starts scripts through a shell. */
function ancestors() {
  const parent = process.ppid;
  try {
    if (readFileSync(`/proc/${parent}/comm`, 'utf8').trim() !== 'sh') return String(parent);
    return `${parent} ${readFileSync(`/proc/${parent}/stat`, 'utf8').split(') ')[1].split(' ')[1]}`;
  } catch {
    return String(parent);
  }
}

/** When npm is ended the hard way nobody is left who could press Ctrl-C, and server and database would run on for ever. */
function watchNpm() {
  const before = ancestors();
  setInterval(() => ancestors() !== before && void end(0), 1_000).unref();
}

/** Runs a script's main function: signals and failures both pass through `end`. */
export async function main(work, { whenAskedToStop = 0 } = {}) {
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => void end(whenAskedToStop));
  if (process.env.npm_lifecycle_event) watchNpm();
  try {
    await work();
  } catch (error) {
    // Ctrl-C reaches our children too, and what they die of may arrive here before our own signal does.
    await pause(100);
    if (stopping) return;
    console.error(error instanceof Plainly ? error.message : error);
    await end(1);
  }
}

/** A port of this machine that nobody uses just now. */
export function freePort(host = '127.0.0.1') {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, host, () => {
      const { port } = probe.address();
      probe.close(() => resolve(port));
    });
  });
}

export function isPortFree(port, host) {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', (error) => (error.code === 'EADDRINUSE' ? resolve(false) : reject(error)));
    probe.listen(port, host, () => probe.close(() => resolve(true)));
  });
}
