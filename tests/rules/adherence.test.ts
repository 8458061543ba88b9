// Adherence beside the published cases, and the Wilson interval against published values.

import { adherence, type AdherenceFacts } from '@/shared/rules/adherence';
import { wilson, z95 } from '@/shared/rules/wilson';
import statistics from '@/tests/published/wilson.json';

const day = (date: string, state: AdherenceFacts['sessions'][number]['state'], endedAt?: string) => ({
  windowFrom: `${date}T06:00:00Z`,
  windowTo: `${date}T20:00:00Z`,
  state,
  endedAt,
});

describe('adherence', () => {
  it('counts from the newest closed window, whatever the order of the list', () => {
    const sessions = [day('2026-05-10', 'missed'), day('2026-05-08', 'complete'), day('2026-05-09', 'missed')];
    expect(adherence({ sessions, holds: [] }, '2026-05-12T21:00:00Z').missedRunning).toBe(2);
  });

  it('does not count a window that is still open as closed', () => {
    const sessions = [day('2026-05-11', 'missed'), day('2026-05-12', 'complete')];
    expect(adherence({ sessions, holds: [] }, '2026-05-12T19:59:59Z').missedRunning).toBe(1);
    expect(adherence({ sessions, holds: [] }, '2026-05-12T20:00:00Z').missedRunning).toBe(0);
  });

  it('wants no call for a session that was excused since', () => {
    const sessions = [day('2026-05-01', 'complete', '2026-05-01T15:00:00Z'), day('2026-05-05', 'missed')];
    const flagsOf = (facts: Partial<AdherenceFacts>) =>
      adherence({ sessions, holds: [], ...facts }, '2026-05-12T21:00:00Z').flags;
    expect(flagsOf({})).toEqual(['recall_needed']);
    expect(flagsOf({ holds: [{ from: '2026-05-04T00:00:00Z', until: '2026-05-06T00:00:00Z' }] })).toEqual([]);
    expect(flagsOf({ recallCallAt: '2026-05-12T21:00:01Z' })).toEqual(['recall_needed']);
  });

  it('judges nothing at a time that cannot be read', () => {
    const { flags, missedRunning } = adherence({ sessions: [day('2026-05-10', 'missed')], holds: [] }, 'now');
    expect([flags, missedRunning]).toEqual([[], 0]);
  });
});

describe('wilson', () => {
  it.each(statistics.cases.map(({ input, expected }) => [input.x, input.n, input.z, expected] as const))(
    'gives the interval of %d of %d',
    (x, n, z, { low, high }) => {
      const interval = wilson(x, n, z ?? z95);
      expect(interval?.low).toBeCloseTo(low, 9);
      expect(interval?.high).toBeCloseTo(high, 9);
    },
  );

  it('is exactly 0 below none and exactly 1 above all, and nothing where nothing was tried', () => {
    expect(wilson(0, 20)?.low).toBe(0);
    expect(wilson(29, 29)?.high).toBe(1);
    expect([wilson(0, 0), wilson(3, 2), wilson(-1, 2)]).toEqual([null, null, null]);
  });
});
