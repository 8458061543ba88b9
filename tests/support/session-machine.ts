// A session as a machine that is driven command by command, and what each command may make of it: an own reading of the safety rules §5, apart
// from the code that is tried. The real side is the reducer over a growing log, with the permit and the record beside it. Only for tests.

import type fc from 'fast-check';
import { clearance } from '@/shared/rules/clearance';
import { chargeOf, minutesOn, type TrapezoidFacts } from '@/shared/rules/dose';
import { mayStartWithPermit } from '@/shared/rules/permit';
import { judgeEvents, type KeptEvent } from '@/shared/rules/session-record';
import { sessionStateAt, type SessionEventFact, type SessionSnapshot } from '@/shared/rules/session';
import type { SessionEventWord } from '@/shared/values/codes';
import { clearedAt, clearedFacts, withFacts } from './clearance-facts';

/** A ramp down that ends is not one that pauses, and who must end a pause matters. */
export const places = [
  'ramp_up',
  'hold',
  'pausing_contact',
  'pausing_person',
  'paused_contact',
  'paused_person',
  'ending',
  'ended',
] as const;
export type Place = (typeof places)[number];

export function placeOf({ state, pausedBy }: SessionSnapshot): Place {
  if (state === 'paused') return pausedBy === 'contact' ? 'paused_contact' : 'paused_person';
  if (state !== 'ramp_down') return state;
  if (pausedBy === null) return 'ending';
  return pausedBy === 'contact' ? 'pausing_contact' : 'pausing_person';
}

type Word = Exclude<SessionEventWord, 'tick'>;
/** What the model knows of the person's side. */
export type Model = { isContactGood: boolean; isStopped: boolean };

export class Machine {
  seconds = 0;
  readonly log: SessionEventFact[] = [];
  private kept: KeptEvent[] = [];
  private words = 0;
  largest = { chargeCoulomb: 0, onSeconds: 0, pauses: 0 };

  constructor(readonly permit: TrapezoidFacts) {}

  now(): SessionSnapshot {
    return sessionStateAt(this.permit, this.log, this.seconds);
  }

  /** Words never fall on one instant with each other or with the end of a phase: each has a fraction of its own. */
  say(word: Word): { before: SessionSnapshot; after: SessionSnapshot } {
    this.words += 1;
    this.seconds = Math.round(this.seconds * 10) / 10 + 0.1 + this.words * 1e-5;
    const before = this.now();
    this.log.push([this.seconds, word]);
    return { before, after: this.now() };
  }

  /** What the server says to the whole log, sent once more with one new event at its end. */
  sendAll(): string[] {
    const incoming = this.log.map(([at, word], sequence) => ({
      ...{ id: `e${sequence}`, sequence, latestSeconds: at, contentHash: `${at} ${word}` },
    }));
    const verdicts = judgeEvents(incoming, this.kept, this.seconds, null);
    this.kept = incoming;
    return verdicts.map(({ verdict }) => verdict);
  }
}

const slack = 1e-6;
export function fail(what: string, real: Machine, ...more: unknown[]): never {
  throw new Error(`${what} at ${real.seconds} s, log ${JSON.stringify(real.log)} ${JSON.stringify(more)}`);
}

/** What holds at every moment whatever was done. */
export function checkBounds(real: Machine): SessionSnapshot {
  const { permit } = real;
  const now = real.now();
  const { chargeCoulomb, onSeconds, pauses, pauseSeconds, currentMilliamp } = now;
  if (chargeCoulomb > chargeOf(permit) + slack) fail('more charge than permitted', real, chargeCoulomb);
  if (onSeconds > minutesOn(permit) * 60 + slack) fail('longer than permitted', real, onSeconds);
  if (currentMilliamp > permit.intensityMilliamp + slack || currentMilliamp < 0) fail('above the permit', real, now);
  if (pauses > 3 || pauseSeconds > 120 + slack) fail('more pauses than allowed', real, now);
  const { largest } = real;
  const isLess = chargeCoulomb < largest.chargeCoulomb - slack || onSeconds < largest.onSeconds - slack;
  if (isLess || pauses < largest.pauses) fail('something delivered was taken back', real, now, largest);
  real.largest = { chargeCoulomb, onSeconds, pauses };
  if ((now.state === 'ended') !== (now.endReason !== null)) fail('an end without a reason', real, now);
  if (now.state === 'ended' && currentMilliamp !== 0) fail('current after the end', real, now);
  return now;
}

/** Places that a word may lead to, from each place: an own reading of the rules. */
function mayFollow(place: Place, word: Word, model: Model): readonly Place[] {
  if (place === 'ended') return ['ended'];
  if (place === 'ending') return word === 'stop' ? ['ending', 'ended'] : ['ending'];
  if (word === 'stop') return place.startsWith('paused_') ? ['ended'] : ['ending', 'ended'];
  const isRunning = place === 'ramp_up' || place === 'hold';
  // A fourth pause, or too little left to come up again: it goes down for good.
  if (word === 'pause')
    return isRunning
      ? ['pausing_person', 'ending', 'ended']
      : [place.startsWith('paused_') ? 'paused_person' : 'pausing_person'];
  if (word === 'resume') return place === 'paused_person' && model.isContactGood ? ['ramp_up'] : [place];
  if (word === 'contact_back') return place === 'paused_contact' ? ['ramp_up'] : [place];
  return [place];
}

/** Places that time alone may lead to. */
export function mayPass(place: Place, model: Model): readonly Place[] {
  const running: readonly Place[] = ['ramp_up', 'hold', 'ending', 'ended'];
  const lost: readonly Place[] = ['pausing_contact', 'paused_contact'];
  const later = running.slice(running.indexOf(place));
  switch (place) {
    case 'ramp_up':
    case 'hold':
      return model.isContactGood ? later : [...later, ...lost];
    case 'ending':
      return ['ending', 'ended'];
    case 'ended':
      return ['ended'];
    // Contact that is back, or a resume that was asked for, takes it up at the end of its ramp.
    case 'pausing_contact':
    case 'pausing_person':
      return [
        place,
        place === 'pausing_contact' ? 'paused_contact' : 'paused_person',
        ...running,
        ...(model.isContactGood ? [] : lost),
      ];
    default:
      return [place, 'ended'];
  }
}

export const visits = new Map<string, number>();
function visit(place: Place, command: string): void {
  const pair = `${place} ${command}`;
  visits.set(pair, (visits.get(pair) ?? 0) + 1);
}

type MachineCommand = fc.Command<Model, Machine>;
function command(name: string, run: (model: Model, real: Machine) => void): MachineCommand {
  return {
    check: () => true,
    run(model, real) {
      visit(placeOf(real.now()), name);
      run(model, real);
      checkBounds(real);
    },
    toString: () => name,
  };
}

function speak(model: Model, real: Machine, word: Word): void {
  const from = placeOf(real.now());
  const { before, after } = real.say(word);
  const [at, to] = [placeOf(before), placeOf(after)];
  if (!mayPass(from, model).includes(at)) fail(`${from} became ${at} by time`, real);
  if (!mayFollow(at, word, model).includes(to)) fail(`${at} became ${to} by ${word}`, real);
  if (word === 'contact_lost') model.isContactGood = false;
  if (word === 'contact_back') model.isContactGood = true;
  if (word === 'stop') {
    if (at !== 'ended') model.isStopped = true;
    const down = sessionStateAt(real.permit, real.log, real.seconds + 10);
    if (down.currentMilliamp !== 0 || down.state !== 'ended') fail('not at 0 within 10 s of a stop', real, down);
  }
  // Never a step: what flows just after a word is what flowed before it.
  if (Math.abs(after.currentMilliamp - before.currentMilliamp) > slack) fail('a step of current', real, before, after);
}

function pass(model: Model, real: Machine, seconds: number): void {
  const before = placeOf(real.now());
  real.seconds += seconds;
  const after = placeOf(real.now());
  if (!mayPass(before, model).includes(after)) fail(`${before} became ${after} in ${seconds} s`, real);
  const waits = before.startsWith('paused_') && seconds >= 120;
  if (waits && after !== 'ended') fail('a pause of 120 s went on', real);
  const lost = !model.isContactGood && seconds > 3;
  if (lost && (after === 'ramp_up' || after === 'hold')) fail('current without contact for more than 3 s', real);
}

/** Things that must change nothing of the run. */
function unmoved(name: string, look: (real: Machine, before: SessionSnapshot) => boolean): MachineCommand {
  return command(name, (_model, real) => {
    const before = real.now();
    if (!look(real, before)) fail(`${name} changed or allowed something`, real, before);
    if (JSON.stringify(real.now()) !== JSON.stringify(before)) fail(`${name} moved the session`, real, before);
  });
}

function mixed<T>(items: readonly T[]): T[] {
  return [...items, ...items].sort((a, b) => JSON.stringify(a).length - JSON.stringify(b).length || (a < b ? 1 : -1));
}

const permitOf = (real: Machine) => ({
  ...{ id: 'k', deviceId: 'd1', prescriptionVersion: 2, counter: 7, expiresAt: '2026-05-12T16:30:00Z', isUsed: true },
  chargeCoulomb: chargeOf(real.permit),
});
const present = { prescriptionVersion: 2, isPaused: false, isLocked: false, deviceLastCounter: 7 };
/** The running session as clearance sees it, in whatever zone the person says to be. */
function mayAskAgain(real: Machine, zone: string): boolean {
  const minutes = minutesOn(real.permit);
  const session = { state: 'running', startedAt: clearedAt, chargeCoulomb: chargeOf(real.permit), minutes } as const;
  const facts = withFacts(clearedFacts, { sessions: [session], participant: { zone } });
  return clearance(facts, clearedAt).allowed;
}

const stops = ['stop', 'red flag', 'pain high', 'permit void', 'lockout', 'over current', 'consent withdrawn'] as const;
const lengths = [0.1, 1, 2.9, 3.2, 10, 30, 119.8, 120.2, 600] as const;

export const commands: readonly MachineCommand[] = [
  ...(['contact_lost', 'contact_back', 'pause', 'resume'] as const).map((word) =>
    command(word, (model, real) => speak(model, real, word)),
  ),
  ...stops.map((name) => command(name, (model, real) => speak(model, real, 'stop'))),
  ...lengths.map((seconds) => command(`${seconds} s pass`, (model, real) => pass(model, real, seconds))),
  // Several in a row come near the bounds of the pauses, which single words by chance hardly do.
  command('a short pause', (model, real) => {
    speak(model, real, 'pause');
    pass(model, real, 10.2);
    speak(model, real, 'resume');
    pass(model, real, 0.5);
  }),
  command('a short loss of contact', (model, real) => {
    speak(model, real, 'contact_lost');
    pass(model, real, 3.2);
    pass(model, real, 10.2);
    speak(model, real, 'contact_back');
    pass(model, real, 0.5);
  }),
  unmoved('reload', (real, before) => {
    // Another page reads the log as it was stored: in no order, some of it twice.
    const again = sessionStateAt(real.permit, mixed(real.log), real.seconds);
    return JSON.stringify(again) === JSON.stringify(before);
  }),
  unmoved('clock jump', (real, before) => {
    // The phone's clock is no fact of a run; what would be asked by it is the same instant of the monotonic one.
    return JSON.stringify(sessionStateAt(real.permit, real.log, real.seconds)) === JSON.stringify(before);
  }),
  unmoved('start again', (real) => {
    const asked = { deviceId: 'd1', counter: 7 };
    const { valid, reasons } = mayStartWithPermit(permitOf(real), present, asked, '2026-05-12T16:10:00Z');
    return !valid && reasons.includes('permit_used') && reasons.includes('counter_used');
  }),
  unmoved('ask for a second permit', (real) => !mayAskAgain(real, 'Europe/Berlin')),
  unmoved('travel', (real) => !mayAskAgain(real, 'Pacific/Apia') && !mayAskAgain(real, 'America/New_York')),
  unmoved('send the log', (real) => real.sendAll().every((verdict) => verdict === 'store' || verdict === 'known')),
  unmoved('send the log again', (real) => {
    real.sendAll();
    return real.sendAll().every((verdict) => verdict === 'known');
  }),
  unmoved('a word that is late', (real, before) => {
    // An event of the past that comes only now is put where it belongs: what it says of after the end has no effect.
    if (before.endedAtSeconds === null) return true;
    const late: SessionEventFact[] = [
      [before.endedAtSeconds + 0.001, 'resume'],
      [before.endedAtSeconds + 0.002, 'contact_back'],
    ];
    return JSON.stringify(sessionStateAt(real.permit, [...late, ...real.log], real.seconds)) === JSON.stringify(before);
  }),
];

export const nameOf = (one: MachineCommand) => one.toString();
/** A way to each place, by the names of commands. */
export const waysTo: Readonly<Record<Place, readonly string[]>> = {
  ramp_up: [],
  hold: ['30 s pass'],
  pausing_contact: ['30 s pass', 'contact_lost', '3.2 s pass'],
  pausing_person: ['30 s pass', 'pause'],
  paused_contact: ['30 s pass', 'contact_lost', '3.2 s pass', '10 s pass', '1 s pass'],
  paused_person: ['30 s pass', 'pause', '10 s pass', '1 s pass'],
  ending: ['30 s pass', 'stop'],
  ended: ['30 s pass', 'stop', '10 s pass', '1 s pass'],
};
