// The run of a session beside the published cases: the properties that must hold for every row of events, and the
// edges that no published case stands on.

import fc from 'fast-check';
import { chargeOf } from '@/shared/rules/dose';
import {
  currentAt,
  plannedAt,
  plannedCurve,
  runCurve,
  sessionStateAt,
  type SessionEventFact,
} from '@/shared/rules/session';
import { sessionEventWords } from '@/shared/values/codes';

const permit = { intensityMilliamp: 2, rampUpSeconds: 30, holdSeconds: 1200, rampDownSeconds: 30 };
const totalOf = (of: typeof permit) => of.rampUpSeconds + of.holdSeconds + of.rampDownSeconds;

const somePermit = fc.record({
  intensityMilliamp: fc.integer({ min: 1, max: 40 }).map((tenths) => tenths / 10),
  rampUpSeconds: fc.integer({ min: 10, max: 120 }),
  holdSeconds: fc.integer({ min: 0, max: 600 }),
  rampDownSeconds: fc.integer({ min: 10, max: 120 }),
});
const someEvents = fc.array(
  fc.tuple(
    fc.integer({ min: 0, max: 9000 }).map((tenths) => tenths / 10),
    fc.constantFrom(...sessionEventWords),
  ),
  { maxLength: 40 },
);
const someRun = fc.tuple(somePermit, someEvents, fc.integer({ min: 0, max: 1400 }));
const slack = 1e-6;

describe('every run of a session', () => {
  it('stays within the charge, the on-time and the intensity of its permit', () => {
    fc.assert(
      fc.property(someRun, ([of, events, at]) => {
        const { chargeCoulomb, onSeconds, currentMilliamp, pauseSeconds, pauses } = sessionStateAt(of, events, at);
        return (
          chargeCoulomb <= chargeOf(of) + slack &&
          onSeconds <= totalOf(of) + slack &&
          currentMilliamp <= of.intensityMilliamp + slack &&
          currentMilliamp >= 0 &&
          pauseSeconds <= 120 &&
          pauses <= 3
        );
      }),
      { numRuns: 2000 },
    );
  });

  it('would stay within them to its end if nothing more happened', () => {
    fc.assert(
      fc.property(someRun, ([of, events]) => {
        const end = sessionStateAt(of, events, Number.POSITIVE_INFINITY);
        return (
          end.state === 'ended' && end.chargeCoulomb <= chargeOf(of) + slack && end.onSeconds <= totalOf(of) + slack
        );
      }),
      { numRuns: 1000 },
    );
  });

  it('never steps: the current changes no faster than a ramp of 10 s', () => {
    fc.assert(
      fc.property(someRun, ([of, events]) => {
        const steepest = of.intensityMilliamp / Math.min(of.rampUpSeconds, of.rampDownSeconds, 10);
        const points = runCurve(of, events, Number.POSITIVE_INFINITY);
        return points.every(({ seconds, milliamp }, index) => {
          const before = points[index - 1];
          if (before === undefined) return milliamp === 0;
          return Math.abs(milliamp - before.milliamp) <= steepest * (seconds - before.seconds) + slack;
        });
      }),
      { numRuns: 1000 },
    );
  });

  it('holds no longer in all than prescribed', () => {
    fc.assert(
      fc.property(someRun, ([of, events]) => {
        const points = runCurve(of, events, Number.POSITIVE_INFINITY);
        const held = points.reduce((sum, { seconds, milliamp }, index) => {
          const before = points[index - 1];
          const isHold = before?.milliamp === of.intensityMilliamp && milliamp === of.intensityMilliamp;
          return isHold ? sum + seconds - before.seconds : sum;
        }, 0);
        return held <= of.holdSeconds + slack;
      }),
      { numRuns: 1000 },
    );
  });

  it('is the same in any order of arrival and with every event twice', () => {
    fc.assert(
      fc.property(someRun, fc.integer(), ([of, events, at], seed) => {
        const mixed = [...events, ...events]
          .map((event, index) => ({ event, key: Math.sin(seed + index * 12.9898) }))
          .sort((a, b) => a.key - b.key)
          .map(({ event }) => event);
        expect(sessionStateAt(of, mixed, at)).toEqual(sessionStateAt(of, events, at));
      }),
      { numRuns: 500 },
    );
  });

  it('is what it was: events that come later change nothing before them', () => {
    fc.assert(
      fc.property(someRun, ([of, events, at]) => {
        const known = events.filter(([seconds]) => seconds <= at);
        expect(sessionStateAt(of, events, at)).toEqual(sessionStateAt(of, known, at));
      }),
      { numRuns: 500 },
    );
  });

  it('changes nothing after its end', () => {
    fc.assert(
      fc.property(someRun, ([of, events, at]) => {
        const then = sessionStateAt(of, events, at);
        if (then.endedAtSeconds === null) return;
        const later: SessionEventFact[] = [...events, [at + 5, 'resume'], [at + 6, 'contact_back'], [at + 7, 'stop']];
        expect(sessionStateAt(of, later, at + 500)).toEqual(then);
      }),
      { numRuns: 1000 },
    );
  });

  it('is at 0 within 10 s of a stop', () => {
    fc.assert(
      fc.property(someRun, ([of, events, at]) => {
        const { currentMilliamp, state, endReason } = sessionStateAt(of, [...events, [at, 'stop']], at + 10);
        const hasEnded = state === 'ended' && endReason !== null;
        return currentMilliamp === 0 && hasEnded;
      }),
      { numRuns: 1000 },
    );
  });
});

describe('a run of a session', () => {
  const at = (events: readonly SessionEventFact[], seconds: number) => sessionStateAt(permit, events, seconds);

  it('tells the time left while it runs, and none while it waits', () => {
    expect(at([], 15).secondsLeft).toBe(1245);
    expect(at([], 630).secondsLeft).toBe(630);
    expect(at([], 1240).secondsLeft).toBe(20);
    expect(at([], 1260).secondsLeft).toBe(0);
    expect(at([[600, 'pause']], 605)).toMatchObject({ secondsLeft: null, pausedBy: 'person', pauseSecondsLeft: 115 });
    expect(at([[600, 'contact_lost']], 700)).toMatchObject({ pausedBy: 'contact', pauseSecondsLeft: 23 });
    expect(at([[600, 'stop']], 604)).toMatchObject({ secondsLeft: 6, pausedBy: null, pauseSecondsLeft: null });
  });

  it('ends at the end of its ramp when stopped on the way into a pause', () => {
    const events: readonly SessionEventFact[] = [
      [600, 'pause'],
      [604, 'stop'],
    ];
    expect(at(events, 606)).toMatchObject({ state: 'ramp_down', remainingHoldSeconds: 0, secondsLeft: 4 });
    expect(at(events, 610)).toMatchObject({
      state: 'ended',
      endReason: 'stopped',
      endedAtSeconds: 610,
      pauseSeconds: 10,
    });
  });

  it('keeps a resume given in the ramp down, and drops it if contact is bad at its end', () => {
    const asked: readonly SessionEventFact[] = [
      [600, 'pause'],
      [604, 'resume'],
    ];
    expect(at(asked, 611).state).toBe('ramp_up');
    expect(at([...asked, [606, 'contact_lost']], 611).state).toBe('paused');
    expect(at([...asked, [606, 'contact_lost'], [620, 'contact_back']], 640).state).toBe('paused');
    expect(at([...asked, [606, 'pause']], 611).state).toBe('paused');
  });

  it('does not resume a lost-contact pause by hand', () => {
    const events: readonly SessionEventFact[] = [
      [600, 'contact_lost'],
      [640, 'resume'],
    ];
    expect(at(events, 650).state).toBe('paused');
  });

  it('lets the safer of two words of one instant win', () => {
    const resumeAndPause: readonly SessionEventFact[] = [
      [600, 'pause'],
      [650, 'pause'],
      [650, 'resume'],
    ];
    expect(at(resumeAndPause, 660).state).not.toBe('hold');
    const stopAndResume: readonly SessionEventFact[] = [
      [600, 'pause'],
      [650, 'stop'],
      [650, 'resume'],
    ];
    expect(at(stopAndResume, 700)).toMatchObject({ state: 'ended', endReason: 'stopped' });
  });

  it('begins the last ramp down although contact went 2 s before', () => {
    expect(at([[1228, 'contact_lost']], 1240)).toMatchObject({ state: 'ramp_down', pauses: 0 });
    expect(at([[1227, 'contact_lost']], 1260)).toMatchObject({ endReason: 'complete' });
  });

  it('names lost contact when the fourth interruption is one', () => {
    const events: SessionEventFact[] = [100, 200, 300].flatMap((start): SessionEventFact[] => [
      [start, 'pause'],
      [start + 20, 'resume'],
    ]);
    expect(at([...events, [400, 'contact_lost']], 500)).toMatchObject({ endReason: 'lost_contact', pauses: 3 });
  });

  it('reads a time before the start, or none, as the start', () => {
    expect(at([], -5)).toMatchObject({ state: 'ramp_up', currentMilliamp: 0, chargeCoulomb: 0 });
    expect(at([[-1, 'stop']], Number.NaN)).toMatchObject({ state: 'ramp_up', endReason: null });
  });

  it('runs no current for a permit of none', () => {
    const none = { intensityMilliamp: Number.NaN, rampUpSeconds: 10, holdSeconds: 60, rampDownSeconds: 10 };
    expect(sessionStateAt(none, [[30, 'pause']], 45)).toMatchObject({ currentMilliamp: 0, chargeCoulomb: 0 });
  });

  it('draws the notch of a pause where it was', () => {
    const events: readonly SessionEventFact[] = [
      [630, 'pause'],
      [660, 'resume'],
    ];
    expect(runCurve(permit, events, 690)).toEqual([
      { seconds: 0, milliamp: 0 },
      { seconds: 30, milliamp: 2 },
      { seconds: 630, milliamp: 2 },
      { seconds: 640, milliamp: 0 },
      { seconds: 660, milliamp: 0 },
      { seconds: 690, milliamp: 2 },
    ]);
    expect(currentAt(permit, events, 645)).toBe(0);
  });

  it('draws as prescribed what nothing disturbs', () => {
    expect(runCurve(permit, [], Number.POSITIVE_INFINITY)).toEqual(plannedCurve(permit));
    fc.assert(
      fc.property(somePermit, fc.integer({ min: -5, max: 900 }), (of, seconds) => {
        const { currentMilliamp, chargeCoulomb } = sessionStateAt(of, [], seconds);
        expect(plannedAt(of, seconds).currentMilliamp).toBeCloseTo(currentMilliamp, 9);
        expect(plannedAt(of, seconds).chargeCoulomb).toBeCloseTo(chargeCoulomb, 9);
      }),
    );
  });
});
