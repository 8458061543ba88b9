// The session as a state machine, driven by commands: what each may lead to from each place stands in a model of its own
// (tests/support/session-machine.ts). Every pair of place and command is visited; then sequences by chance, shrunk to the shortest that fails.

import fc from 'fast-check';
import {
  commands,
  Machine,
  nameOf,
  placeOf,
  places,
  visits,
  waysTo,
  type Model,
} from '@/tests/support/session-machine';
import { patience, tried } from '@/tests/support/runs';

const permit = { intensityMilliamp: 2, rampUpSeconds: 20, holdSeconds: 600, rampDownSeconds: 20 };
const start = (of = permit) => ({
  model: { isContactGood: true, isStopped: false } satisfies Model,
  real: new Machine(of),
});
const byName = new Map(commands.map((one) => [nameOf(one), one]));

describe('the machine of a session', () => {
  it('has 30 commands and 8 places', () => {
    expect([new Set(commands.map(nameOf)).size, places.length]).toEqual([30, 8]);
  });

  it.each(places.flatMap((place) => commands.map((one) => [nameOf(one), place] as const)))(
    'takes %s in %s as the model says',
    (name, place) => {
      const { model, real } = start();
      for (const step of waysTo[place]) byName.get(step)?.run(model, real);
      expect(placeOf(real.now())).toBe(place);
      byName.get(name)?.run(model, real);
      // And the machine still works: a stop from here ends it.
      byName.get('stop')?.run(model, real);
      byName.get('10 s pass')?.run(model, real);
      byName.get('1 s pass')?.run(model, real);
      expect(placeOf(real.now())).toBe('ended');
    },
  );

  it(
    'does as the model says in any sequence of them',
    () => {
      const somePermit = fc.record({
        intensityMilliamp: fc.integer({ min: 1, max: 40 }).map((tenths) => tenths / 10),
        rampUpSeconds: fc.integer({ min: 10, max: 40 }),
        holdSeconds: fc.integer({ min: 0, max: 900 }),
        rampDownSeconds: fc.integer({ min: 10, max: 40 }),
      });
      // What ends a session would end most sequences early: what goes on comes more often.
      const goingOn = commands.filter((one) => /contact|pause|resume|pass|short/.test(nameOf(one)));
      const some = [...commands, ...goingOn, ...goingOn].map((one) => fc.constant(one));
      const sequences = fc.commands(some, { maxCommands: 60, size: 'max' });
      fc.assert(
        fc.property(somePermit, sequences, (of, sequence) => {
          fc.modelRun(() => start(of), sequence);
        }),
        tried('T7'),
      );
    },
    patience,
  );

  it('was visited in every pair of place and command', () => {
    const wanted = places.flatMap((place) => commands.map((one) => `${place} ${nameOf(one)}`));
    expect(wanted.filter((pair) => (visits.get(pair) ?? 0) === 0)).toEqual([]);
    expect(wanted).toHaveLength(240);
  });
});
