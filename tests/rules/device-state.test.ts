// The state machine of the register of stimulators.

import {
  deviceStateReachable,
  deviceStateWords,
  endsAssignment,
  mayAssign,
  voidsPermit,
} from '@/shared/rules/device-state';

describe('a stimulator’s state', () => {
  it.each([
    ['stock', 'out', true],
    ['out', 'stock', true],
    ['out', 'recalled', true],
    ['out', 'quarantined', true],
    ['out', 'lost', true],
    ['out', 'retired', false],
    ['recalled', 'stock', false],
    ['recalled', 'quarantined', true],
    ['lost', 'stock', false],
    ['lost', 'quarantined', true],
    ['quarantined', 'stock', true],
    ['quarantined', 'out', false],
    ['retired', 'stock', false],
  ] as const)('from %s to %s is %s', (from, to, reachable) => {
    expect(deviceStateReachable(from, to)).toBe(reachable);
  });

  it('leads nowhere once retired, and never to itself', () => {
    for (const state of deviceStateWords) {
      expect(deviceStateReachable('retired', state)).toBe(false);
      expect(deviceStateReachable(state, state)).toBe(false);
    }
  });

  it('lets only a device in stock be handed out', () => {
    expect(deviceStateWords.filter(mayAssign)).toEqual(['stock']);
  });

  it('leaves a quarantined or recalled device with the person who has it', () => {
    expect(deviceStateWords.filter(endsAssignment)).toEqual(['stock', 'lost', 'retired']);
  });

  it('voids a live permit in every state but out', () => {
    expect(deviceStateWords.filter((state) => !voidsPermit(state))).toEqual(['out']);
  });
});
