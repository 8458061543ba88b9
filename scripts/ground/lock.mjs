// What: lets one process at a time do a thing in this checkout: build, or run the lasting database.
// Must not: believe the note of a process that is gone; a cut-off run must never need clearing up by hand.
import { mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { workFolder } from './paths.mjs';

/** The process that holds the note, if it is alive and is one of our scripts (numbers are given out again). */
function holder(file) {
  const pid = Number(readFileSync(file, 'utf8'));
  if (!(pid > 0)) return undefined;
  try {
    process.kill(pid, 0);
  } catch (error) {
    if (error.code !== 'EPERM') return undefined;
  }
  try {
    const command = readFileSync(`/proc/${pid}/cmdline`, 'utf8');
    return command.includes('.mjs') || command.includes('jest') ? pid : undefined;
  } catch {
    return pid;
  }
}

/** Takes the note and answers with undefined, or answers with the number of the process that has it. */
function take(file) {
  mkdirSync(workFolder, { recursive: true });
  try {
    writeFileSync(file, String(process.pid), { flag: 'wx' });
    return undefined;
  } catch (error) {
    if (error.code !== 'EEXIST') throw error;
  }
  const other = holder(file);
  if (other !== undefined && other !== process.pid) return other;
  rmSync(file, { force: true });
  return take(file);
}

/** For as long as this process lives. Answers with the process that is in the way, or undefined. */
export function claim(name) {
  const file = path.join(workFolder, name);
  const other = take(file);
  if (other === undefined) process.once('exit', () => rmSync(file, { force: true }));
  return other;
}

/** Waits for its turn. */
export async function inTurn(name, work) {
  const file = path.join(workFolder, name);
  while (take(file) !== undefined) await pause(250);
  try {
    return await work();
  } finally {
    rmSync(file, { force: true });
  }
}
