import { rampDownCause, type RunDose, type RunningFacts } from '@/shared/rules/running';
import { deviceStateWords } from '@/shared/rules/device-state';

const running: RunDose = {
  ...{ waveform: 'tDCS', intensityMilliamp: 2, rampUpSeconds: 30, holdSeconds: 1200, rampDownSeconds: 30 },
  electrodes: [
    { position: 'F3', polarity: 'anode', areaSquareCentimetre: 25, share: 1 },
    { position: 'Fp2', polarity: 'cathode', areaSquareCentimetre: 25, share: 1 },
  ],
};
const asBefore: RunningFacts = {
  ...{ voidedBy: null, running, inForce: running, isPaused: false, isLocked: false, device: 'out' },
};
const cause = (change: Partial<RunningFacts>) => rampDownCause({ ...asBefore, ...change });
const amended = (change: Partial<RunDose>) => cause({ inForce: { ...running, ...change } });

it('lets a session go on while nothing has changed', () => {
  expect(rampDownCause(asBefore)).toBeNull();
});

it('ramps down for a lockout, a pause, a withdrawal, and on a permit that was void before it began', () => {
  expect(cause({ isLocked: true })).toBe('lockout');
  expect(cause({ isPaused: true })).toBe('paused');
  expect(cause({ inForce: null })).toBe('withdrawn');
  expect(cause({ voidedBy: 'amended' })).toBe('void');
});

it.each(deviceStateWords.filter((state) => state !== 'out'))('ramps down on a stimulator that is %s', (device) => {
  expect(cause({ device })).toBe('device');
});

it('ramps down on a stimulator of which nothing is known', () => {
  expect(cause({ device: null })).toBe('device');
});

it('goes on after an amendment that allows as much or more', () => {
  expect(amended({})).toBeNull();
  expect(amended({ intensityMilliamp: 2.5, holdSeconds: 1500 })).toBeNull();
  expect(amended({ electrodes: [...running.electrodes].reverse() })).toBeNull();
  expect(amended({ rampUpSeconds: 20, holdSeconds: 1230, rampDownSeconds: 20 })).toBeNull();
});

it.each<[string, Partial<RunDose>]>([
  ['less current', { intensityMilliamp: 1.9 }],
  ['a shorter hold', { holdSeconds: 1199 }],
  ['less charge in the same time', { intensityMilliamp: 2, rampUpSeconds: 30, holdSeconds: 1170, rampDownSeconds: 60 }],
  ['less time for more charge', { intensityMilliamp: 2.5, holdSeconds: 1100 }],
  ['a slower ramp up', { rampUpSeconds: 31, holdSeconds: 1300 }],
  ['a slower ramp down', { rampDownSeconds: 31, holdSeconds: 1300 }],
  ['another waveform', { waveform: 'tACS' }],
  ['one pad elsewhere', { electrodes: running.electrodes.map((each) => ({ ...each, position: `${each.position}h` })) }],
  ['the poles changed', { electrodes: running.electrodes.map((each) => ({ ...each, polarity: 'anode' })) }],
  ['smaller pads', { electrodes: running.electrodes.map((each) => ({ ...each, areaSquareCentimetre: 20 })) }],
  ['a pad less', { electrodes: running.electrodes.slice(1) }],
])('ramps down after an amendment to %s', (_what, change) => {
  expect(amended(change)).toBe('amended');
});
