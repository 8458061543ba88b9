// The order of the worklist and what is worth a look.

import fc from 'fast-check';
import { compareRank, rankWorklist, reportWorthLooking, worklistRank } from '@/shared/rules/worklist';
import { worklistLevels } from '@/shared/values/codes';

const item = (level: (typeof worklistLevels)[number], ownerAccountId: string | null, openedAt: string) => ({
  level,
  ownerAccountId,
  openedAt,
});

describe('rankWorklist', () => {
  it('goes by level, then nobody’s before somebody’s, then the newest', () => {
    const wanted = [
      item('safety', null, '2026-05-12T09:00:00Z'),
      item('safety', null, '2026-05-12T08:00:00Z'),
      item('safety', 'a1', '2026-05-12T11:00:00Z'),
      item('review', null, '2026-05-12T10:00:00Z'),
      item('flag', 'a1', '2026-05-12T11:00:00Z'),
      item('due', null, '2026-05-12T10:00:00Z'),
    ];
    expect(rankWorklist([...wanted].reverse())).toEqual(wanted);
  });

  it('orders the levels from safety to due', () => {
    const ranks = worklistLevels.map((level) => worklistRank(item(level, null, '2026-05-12T09:00:00Z'))[0]);
    expect(ranks).toEqual([0, 1, 2, 3, 4, 5]);
  });

  it('gives one order whatever came first', () => {
    const some = fc.record({
      level: fc.constantFrom(...worklistLevels),
      ownerAccountId: fc.option(fc.constant('a1')),
      openedAt: fc.integer({ min: 0, max: 50 }).map((minute) => new Date(minute * 60_000).toISOString()),
    });
    fc.assert(
      fc.property(fc.array(some), (items) => {
        const ranked = rankWorklist(items);
        return ranked.every((each, index) => {
          const before = ranked[index - 1];
          return before === undefined || compareRank(worklistRank(before), worklistRank(each)) <= 0;
        });
      }),
    );
  });

  it('puts an item whose time cannot be read last among its equals', () => {
    const items = [item('look', null, 'then'), item('look', null, '2026-05-12T09:00:00Z')];
    expect(rankWorklist(items).map(({ openedAt }) => openedAt)).toEqual(['2026-05-12T09:00:00Z', 'then']);
  });
});

describe('reportWorthLooking', () => {
  const smooth = {
    number: 4,
    endReason: 'complete',
    completeness: 'complete',
    effects: [{ kind: 'tingling', strength: 3 }],
  } as const;

  it('leaves a smooth session alone', () => {
    expect(reportWorthLooking(smooth)).toEqual([]);
    expect(reportWorthLooking({ ...smooth, gapSeconds: 29, conflicts: 0 })).toEqual([]);
  });

  it.each([
    ['strong_effect', { effects: [{ kind: 'burning', strength: 4 }] }],
    ['stopped_early', { endReason: 'stopped' }],
    ['stopped_early', { completeness: 'partial' }],
    ['stopped_early', { completeness: null }],
    ['first_session', { number: 1 }],
    ['record_conflict', { conflicts: 1 }],
    ['record_conflict', { gapSeconds: 30 }],
  ] as const)('shows one for %s (%#)', (reason, changes) => {
    expect(reportWorthLooking({ ...smooth, ...changes })).toEqual([reason]);
  });
});
