// Clearance: allowed hours, gap, counts a day and a week, the call after a long break. Hours and days are local
// calendar time in the person's present zone; gaps and weeks are elapsed time.

import { hourMilliseconds, isBelow } from '@/shared/values/units';
import { isTime, isoOf, localDate, nextMidnight } from '@/shared/values/zone';
import { nextOpening, openHoursAt } from '../hours';
import { fitsUnder, weekWindow } from '../rolling';
import { allKnown, isPrescribed, lastSession, type ClearanceContext } from './context';
import { when, type Reason } from './reason';

export function hoursReasons(context: ClearanceContext): Reason[] {
  if (!isPrescribed(context)) return [];
  const { facts, known, now, zone } = context;
  const time = (name: string, value: string | undefined) =>
    known.text(name, value !== undefined && isTime(value) ? value : undefined);
  const hoursFrom = time('prescription.hours_from', facts.prescription?.hoursFrom);
  const hoursTo = time('prescription.hours_to', facts.prescription?.hoursTo);
  if (zone === undefined || hoursFrom === undefined || hoursTo === undefined) return [];
  const hours = { hoursFrom, hoursTo, zone };
  if (openHoursAt(now, hours) !== undefined) return [];
  const opensAt = nextOpening(now, hours);
  return when(true, 'outside_hours', {
    layer: 'prescription',
    until: opensAt === undefined ? undefined : isoOf(opensAt),
  });
}

export function gapReasons(context: ClearanceContext): Reason[] {
  if (!isPrescribed(context)) return [];
  const { facts, known, now } = context;
  const limit = known.amount('prescription.min_gap_h', facts.prescription?.minGapHours);
  const last = lastSession(context);
  if (limit === undefined || last === undefined) return [];
  const value = (now - last.endedAt) / hourMilliseconds;
  const until = isoOf(Math.ceil(last.endedAt + limit * hourMilliseconds - 1e-3));
  // Instants are whole milliseconds: a tolerance of 1e-9 on 20 h is less than one of them.
  return when(isBelow(value, limit), 'gap_too_short', { until, value, limit, unit: 'h', layer: 'prescription' });
}

export function dayCountReasons(context: ClearanceContext): Reason[] {
  if (!isPrescribed(context)) return [];
  const { facts, known, now, zone, today } = context;
  const limit = known.amount('prescription.max_per_day', facts.prescription?.maxPerDay);
  const sessions = allKnown(context.sessions, 'startedAt');
  if (limit === undefined || sessions === undefined || zone === undefined) return [];
  const value = sessions.filter(({ startedAt }) => localDate(startedAt, zone) === today).length;
  const until = isoOf(nextMidnight(now, zone));
  return when(value >= limit, 'day_count_reached', { until, value, limit, layer: 'prescription' });
}

export function weekCountReasons(context: ClearanceContext): Reason[] {
  if (!isPrescribed(context)) return [];
  const { facts, known, now } = context;
  const limit = known.amount('prescription.max_per_7_days', facts.prescription?.maxPer7Days);
  const sessions = allKnown(context.sessions, 'endedAt');
  if (limit === undefined || sessions === undefined) return [];
  const counted = sessions.map(({ endedAt }) => ({ endedAt, amount: 1 }));
  const fit = fitsUnder(counted, 1, limit, now, weekWindow);
  if (fit.fits) return [];
  const until = fit.at === undefined ? undefined : isoOf(fit.at);
  return when(true, 'week_count_reached', { until, value: fit.sum, limit, layer: 'prescription' });
}

/** Own choice: after more than 7 days with something missed in them, somebody calls first. */
export function recallReasons(context: ClearanceContext): Reason[] {
  const { facts, known, now } = context;
  const missed = known.amount('missed_since_last', facts.missedSinceLast);
  const calledAt = facts.recallCallAt === undefined ? undefined : known.instant('recall_call_at', facts.recallCallAt);
  const last = lastSession(context);
  if (missed === undefined || missed < 1 || last === undefined || now - last.endedAt <= weekWindow) return [];
  const wasCalled = calledAt !== undefined && calledAt > last.endedAt && calledAt <= now;
  return when(!wasCalled, 'recall_call_due', { value: missed });
}
