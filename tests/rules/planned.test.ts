// What the plan adds to clearance: outside every window, nothing left to do, and which reasons are only steps still to be taken.

import { clearance, type Reason } from '@/shared/rules/clearance';
import {
  isNotAskedYet,
  isStartStep,
  nextPlanned,
  plannedNow,
  withDeviceAtHand,
  withPlan,
} from '@/shared/rules/clearance/planned';
import { reason } from '@/shared/rules/clearance/reason';
import { reasonCodes } from '@/shared/values/codes';
import { clearedAt, clearedFacts } from '@/tests/support/clearance-facts';

const open = { windowFrom: '2026-05-12T05:00:00Z', windowTo: '2026-05-12T20:00:00Z', closedWhy: null };
const later = { windowFrom: '2026-05-13T05:00:00Z', windowTo: '2026-05-13T20:00:00Z', closedWhy: null };
const yes = { allowed: true, reasons: [] } as const;
const no = (...reasons: [Reason, ...Reason[]]) => ({ allowed: false, reasons }) as const;

describe('the session that a start would be for', () => {
  it('is the first that is not closed and whose window is not over', () => {
    expect(nextPlanned([{ ...open, closedWhy: 'done' }, later], clearedAt)).toBe(later);
    expect(nextPlanned([open, later], '2026-05-12T19:59:59Z')).toBe(open);
    expect(nextPlanned([open, later], open.windowTo)).toBe(later);
    expect(nextPlanned([open], open.windowTo)).toBeUndefined();
    expect(nextPlanned([open], 'now')).toBeUndefined();
    expect(nextPlanned([{ ...open, windowTo: 'then' }], clearedAt)).toBeUndefined();
  });

  it('is now from the instant at which its window opens', () => {
    expect(plannedNow([open, later], open.windowFrom)).toBe(open);
    expect(plannedNow([open], '2026-05-12T04:59:59Z')).toBeUndefined();
    expect(plannedNow([open], 'now')).toBeUndefined();
    expect(plannedNow([], clearedAt)).toBeUndefined();
  });
});

describe('the plan', () => {
  it('changes nothing while a window is open', () => {
    expect(withPlan(yes, [open], clearedAt)).toBe(yes);
    const held = no(reason('diary_missing'));
    expect(withPlan(held, [open], clearedAt)).toBe(held);
  });

  it('says when the next window opens, once, in its place among the reasons', () => {
    const wanted = { ...reason('outside_hours'), layer: 'prescription', until: later.windowFrom };
    expect(withPlan(yes, [later], clearedAt)).toEqual({ allowed: false, reasons: [wanted] });
    const before = no(
      reason('account_inactive'),
      reason('outside_hours', { until: '2026-05-12T05:00:00Z' }),
      reason('diary_missing'),
    );
    expect(withPlan(before, [later], clearedAt)).toEqual({
      allowed: false,
      reasons: [reason('account_inactive'), wanted, reason('diary_missing')],
    });
  });

  it('says that the course is through when nothing is left, unless that or a missing prescription is said', () => {
    expect(withPlan(yes, [], clearedAt)).toEqual(no(reason('course_complete', { layer: 'prescription' })));
    expect(withPlan(no(reason('diary_missing')), [], clearedAt).reasons.map(({ code }) => code)).toEqual([
      'course_complete',
      'diary_missing',
    ]);
    for (const said of [no(reason('course_complete')), no(reason('prescription_unsigned'))]) {
      expect(withPlan(said, [], clearedAt)).toBe(said);
    }
  });
});

describe('a step still to be taken', () => {
  it('is the check, the helper, the battery, and nothing else', () => {
    const steps = reasonCodes.filter((code) => isStartStep(reason(code)));
    expect(steps).toEqual([
      'battery_low',
      'precheck_missing',
      'precheck_expired',
      'precheck_other_person',
      'precheck_hold',
      'helper_absent',
    ]);
    expect(isStartStep(reason('precheck_hold', { resolvedBy: 'time' }))).toBe(false);
    expect(isStartStep(reason('precheck_hold', { resolvedBy: 'clinician' }))).toBe(false);
    expect(isStartStep(reason('unknown_fact', { fact: 'device.battery_pct' }))).toBe(true);
    expect(isStartStep(reason('unknown_fact', { fact: 'device' }))).toBe(false);
  });

  it('is a battery that nobody has read yet', () => {
    expect(isNotAskedYet({ code: 'unknown_fact', fact: 'device.battery_pct' })).toBe(true);
    expect(isNotAskedYet({ code: 'unknown_fact', fact: 'device.recalled' })).toBe(false);
    expect(isNotAskedYet({ code: 'battery_low', fact: 'device.battery_pct' })).toBe(false);
  });
});

it('takes another device at hand for none', () => {
  expect(withDeviceAtHand(clearedFacts, true)).toBe(clearedFacts);
  const { allowed, reasons } = clearance(withDeviceAtHand(clearedFacts, false), clearedAt);
  expect([allowed, reasons.map(({ code }) => code)]).toEqual([false, ['device_unassigned']]);
});
