// The run of one session, event by event: what the current does between events, and what each word changes.
//
// Time is seconds since the start of the first ramp up, on one monotonic clock. The current is piecewise linear, so
// charge and on-time are summed exactly, piece by piece, and never by sampling. At one instant a phase that ends
// there ends first (what expires at T is over at T), then the words of that instant act, and last of all contact
// that has been lost for 3 s begins its pause: contact that is back at 3 s is in time.
//
// A mutable object inside one call, never outside it: `runUntil` makes it, reads it and drops it.

import type { EndReason, SessionEventWord } from '@/shared/values/codes';
import { atLeast } from '@/shared/values/units';
import type { TrapezoidFacts } from '../dose/facts';

/** Own choices, as the safety rules say them. */
export const contactGraceSeconds = 3;
export const mostPauses = 3;
export const mostPauseSeconds = 120;
/** Every ramp down but the planned last one takes the prescribed time, at most this. */
export const mostStopRampSeconds = 10;

/** Seconds, and mA at both ends. */
export type Piece = { readonly from: number; readonly to: number; readonly start: number; readonly end: number };
type Phase = 'ramp_up' | 'hold' | 'last_down' | 'pause_down' | 'paused' | 'end_down' | 'ended';
type Cause = 'contact' | 'person';

/** Words of one instant in the order in which the last one is the safest. */
const wordOrder: readonly SessionEventWord[] = ['contact_back', 'resume', 'tick', 'contact_lost', 'pause', 'stop'];

function magnitude(value: number): number {
  return Number.isFinite(value) ? Math.abs(value) : 0;
}

export class Run {
  readonly up: number;
  readonly down: number;
  readonly stopRamp: number;
  readonly intensity: number;
  private readonly permittedOn: number;
  private readonly permittedCharge: number;

  phase: Phase = 'ramp_up';
  private phaseFrom = 0;
  private phaseLength: number;
  private phaseStart = 0;
  private phaseEnd: number;
  /** Up to here everything is summed. */
  private settledAt = 0;

  holdLeft: number;
  chargeMilliampSeconds = 0;
  onSeconds = 0;
  readonly pieces: Piece[] = [];

  private isContactGood = true;
  private lostAt = 0;
  pauses = 0;
  private pausedBefore = 0;
  private pauseFrom: number | undefined;
  cause: Cause = 'person';
  private isResumeWanted = false;
  isStopping = false;
  private reason: EndReason = 'complete';
  endReason: EndReason | null = null;
  endedAt: number | null = null;

  constructor(permit: TrapezoidFacts) {
    this.intensity = magnitude(permit.intensityMilliamp);
    this.up = magnitude(permit.rampUpSeconds);
    this.down = magnitude(permit.rampDownSeconds);
    this.holdLeft = magnitude(permit.holdSeconds);
    this.stopRamp = Math.min(this.down, mostStopRampSeconds);
    this.permittedOn = this.up + this.holdLeft + this.down;
    this.permittedCharge = this.intensity * (this.holdLeft + (this.up + this.down) / 2);
    this.phaseLength = this.up;
    this.phaseEnd = this.intensity;
  }

  currentAt(seconds: number): number {
    if (this.phaseLength === 0 || !Number.isFinite(this.phaseLength)) return this.phaseEnd;
    const part = Math.min(1, Math.max(0, (seconds - this.phaseFrom) / this.phaseLength));
    return this.phaseStart + (this.phaseEnd - this.phaseStart) * part;
  }

  /** Time left in the present phase. */
  restAt(seconds: number): number {
    return Math.max(0, this.phaseFrom + this.phaseLength - seconds);
  }

  pauseSecondsAt(seconds: number): number {
    const running = this.pauseFrom === undefined ? 0 : (this.endedAt ?? seconds) - this.pauseFrom;
    return Math.min(mostPauseSeconds, this.pausedBefore + running);
  }

  isPauseOver(seconds: number): boolean {
    return atLeast(this.pauseSecondsAt(seconds), mostPauseSeconds);
  }

  private sumUpTo(seconds: number): void {
    if (seconds <= this.settledAt) return;
    const piece = {
      from: this.settledAt,
      to: seconds,
      start: this.currentAt(this.settledAt),
      end: this.currentAt(seconds),
    };
    this.settledAt = seconds;
    if (this.phase === 'ended') return;
    this.pieces.push(piece);
    this.chargeMilliampSeconds += ((piece.start + piece.end) / 2) * (piece.to - piece.from);
    if (piece.start > 0 || piece.end > 0) this.onSeconds += piece.to - piece.from;
  }

  private begin(phase: Phase, at: number, length: number, end: number): void {
    const start = phase === 'ended' || phase === 'paused' ? 0 : this.currentAt(at);
    this.phase = phase;
    this.phaseFrom = at;
    this.phaseLength = length;
    this.phaseStart = start;
    this.phaseEnd = end;
  }

  private finish(reason: EndReason, at: number): void {
    this.endReason = reason;
    this.endedAt = at;
    this.begin('ended', at, Number.POSITIVE_INFINITY, 0);
  }

  private endByLimit(): EndReason {
    return this.cause === 'contact' ? 'lost_contact' : 'pause_limit';
  }

  private rampDownToEnd(reason: EndReason, at: number): void {
    this.reason = reason;
    this.begin('end_down', at, this.stopRamp, 0);
  }

  private interrupt(cause: Cause, at: number): void {
    const current = this.currentAt(at);
    const onAfter = this.onSeconds + (current > 0 ? this.stopRamp : 0);
    const chargeAfter = this.chargeMilliampSeconds + (current * this.stopRamp) / 2;
    const holdNow = this.phase === 'hold' ? this.restAt(at) : this.holdLeft;
    const byTime = this.permittedOn - onAfter - this.up - this.down;
    const byCharge =
      this.intensity > 0 ? (this.permittedCharge - chargeAfter) / this.intensity - (this.up + this.down) / 2 : byTime;
    const left = Math.min(holdNow, byTime, byCharge);
    this.cause = cause;
    if (!(left > 1e-9)) return this.rampDownToEnd('too_short_to_resume', at);
    if (this.pauses >= mostPauses) return this.rampDownToEnd(this.endByLimit(), at);
    this.pauses += 1;
    this.holdLeft = left;
    this.pauseFrom = at;
    this.isResumeWanted = false;
    this.begin('pause_down', at, this.stopRamp, 0);
  }

  private rampUpAgain(at: number): void {
    this.pausedBefore = this.pauseSecondsAt(at);
    this.pauseFrom = undefined;
    this.isResumeWanted = false;
    this.begin('ramp_up', at, this.up, this.intensity);
  }

  private endPhase(at: number): void {
    if (this.phase === 'ramp_up') return this.begin('hold', at, this.holdLeft, this.intensity);
    if (this.phase === 'hold') return this.begin('last_down', at, this.down, 0);
    if (this.phase === 'last_down') return this.finish(this.isStopping ? 'stopped' : 'complete', at);
    if (this.phase === 'end_down') return this.finish(this.reason, at);
    if (this.phase === 'pause_down' && this.isStopping) return this.finish('stopped', at);
    if (this.isPauseOver(at)) return this.finish(this.endByLimit(), at);
    const isAsked = this.cause === 'contact' || this.isResumeWanted;
    if (isAsked && this.isContactGood) return this.rampUpAgain(at);
    // A resume that meets bad contact at the end of the ramp is not kept.
    this.isResumeWanted = false;
    this.begin('paused', at, mostPauseSeconds - this.pauseSecondsAt(at), 0);
  }

  private isInterruptible(): boolean {
    return this.phase === 'ramp_up' || this.phase === 'hold';
  }

  /** Everything that happens by itself up to an instant; contact timers at that very instant only if `inclusive`. */
  settle(seconds: number, inclusive: boolean): void {
    while (this.phase !== 'ended') {
      const phaseOver = this.phaseFrom + this.phaseLength;
      const contactOver =
        this.isInterruptible() && !this.isContactGood ? this.lostAt + contactGraceSeconds : Number.POSITIVE_INFINITY;
      if (phaseOver <= seconds && phaseOver <= contactOver) {
        this.sumUpTo(phaseOver);
        this.endPhase(phaseOver);
      } else if (contactOver < seconds || (inclusive && contactOver <= seconds)) {
        this.sumUpTo(contactOver);
        this.interrupt('contact', contactOver);
      } else {
        break;
      }
    }
    this.sumUpTo(seconds);
  }

  hear(word: SessionEventWord, at: number): void {
    if (this.phase === 'ended') return;
    const isPausing = this.phase === 'pause_down' || this.phase === 'paused';
    if (word === 'contact_lost' && this.isContactGood) {
      this.isContactGood = false;
      this.lostAt = at;
    }
    if (word === 'contact_back') {
      this.isContactGood = true;
      if (this.phase === 'paused' && this.cause === 'contact') this.rampUpAgain(at);
    }
    if (word === 'pause' && this.isInterruptible()) this.interrupt('person', at);
    else if (word === 'pause' && isPausing) {
      this.cause = 'person';
      this.isResumeWanted = false;
    }
    if (word === 'resume' && isPausing && this.cause === 'person' && this.isContactGood) {
      if (this.phase === 'paused') this.rampUpAgain(at);
      else this.isResumeWanted = true;
    }
    if (word === 'stop') this.stop(at);
  }

  private stop(at: number): void {
    if (this.isInterruptible()) return this.rampDownToEnd('stopped', at);
    if (this.phase === 'paused') return this.finish('stopped', at);
    if (this.phase === 'pause_down' && !this.isPauseOver(at)) this.isStopping = true;
    if (this.phase === 'last_down' && !this.isStopping) {
      this.isStopping = true;
      this.begin('last_down', at, Math.min(this.stopRamp, this.restAt(at)), 0);
    }
  }
}

/** The run as it stands at an instant, of the events up to it, in any order and with repeats. */
export function runUntil(
  permit: TrapezoidFacts,
  events: readonly (readonly [seconds: number, word: SessionEventWord])[],
  seconds: number,
): Run {
  const run = new Run(permit);
  const heard = events
    .filter(([at]) => at >= 0 && at <= seconds)
    .sort(([a, first], [b, second]) => a - b || wordOrder.indexOf(first) - wordOrder.indexOf(second));
  for (const [index, [at, word]] of heard.entries()) {
    const [before, last] = heard[index - 1] ?? [];
    if (before === at && last === word) continue;
    run.settle(at, false);
    run.hear(word, at);
  }
  run.settle(seconds, true);
  return run;
}
