// Clearance: charge and on-time of the last 24 h and 7 days with the planned session on top.

import { isBelow } from '@/shared/values/units';
import { isoOf } from '@/shared/values/zone';
import type { LimitLayer, ReasonCode } from '@/shared/values/codes';
import { ceilings, type Ceiling } from '../ceilings';
import { dayWindow, fitsUnder, weekWindow, type Counted } from '../rolling';
import { allKnown, isPrescribed, type ClearanceContext } from './context';
import { when, type Reason } from './reason';

type Rolling = {
  readonly code: ReasonCode;
  readonly counted: readonly Counted[] | undefined;
  readonly planned: number | undefined;
  readonly limit: number | undefined;
  readonly window: number;
  readonly unit: string;
  readonly layer: LimitLayer;
  readonly source?: string;
};

function rollingReason(now: number, { code, counted, planned, limit, window, ...more }: Rolling): Reason[] {
  if (counted === undefined || planned === undefined || limit === undefined) return [];
  const fit = fitsUnder(counted, planned, limit, now, window);
  if (fit.fits) return [];
  // Never by time: then a smaller dose is needed, which is the prescriber's.
  if (fit.at === undefined)
    return when(true, code, { ...more, value: fit.sum + planned, limit, resolvedBy: 'clinician' });
  return when(true, code, { ...more, value: fit.sum + planned, limit, until: isoOf(fit.at) });
}

export function plannedDose({ facts, known }: ClearanceContext): { chargeCoulomb?: number; minutes?: number } {
  const dose = known.some('prescription.dose', facts.prescription?.dose);
  return {
    chargeCoulomb: known.amount('prescription.dose.charge_C', dose?.chargeCoulomb),
    minutes: known.amount('prescription.dose.minutes', dose?.minutes),
  };
}

export function minutesReasons(context: ClearanceContext): Reason[] {
  if (!isPrescribed(context)) return [];
  const { value: ceiling, source } = ceilings.minutesPerDay;
  const site = context.known.some('site', context.facts.site);
  const setLimit =
    site?.maxMinutes24h === undefined ? ceiling : context.known.amount('site.max_minutes_24h', site.maxMinutes24h);
  const isSite = setLimit !== undefined && isBelow(setLimit, ceiling);
  return rollingReason(context.now, {
    code: 'minutes_24h',
    counted: allKnown(context.sessions, 'endedAt', 'minutes')?.map(({ endedAt, minutes }) => ({
      endedAt,
      amount: minutes,
    })),
    planned: plannedDose(context).minutes,
    limit: site === undefined || setLimit === undefined ? undefined : Math.min(setLimit, ceiling),
    window: dayWindow,
    unit: 'min',
    layer: isSite ? 'site' : 'ceiling',
    source: isSite ? 'site protocol' : source,
  });
}

function chargeReasons(
  context: ClearanceContext,
  code: 'charge_24h' | 'charge_7d',
  setLimit: number | undefined,
  ceiling: Ceiling,
  window: number,
): Reason[] {
  const isSite = setLimit !== undefined && isBelow(setLimit, ceiling.value);
  return rollingReason(context.now, {
    code,
    counted: allKnown(context.sessions, 'endedAt', 'chargeCoulomb')?.map(({ endedAt, chargeCoulomb }) => ({
      endedAt,
      amount: chargeCoulomb,
    })),
    planned: plannedDose(context).chargeCoulomb,
    limit: setLimit === undefined ? undefined : Math.min(setLimit, ceiling.value),
    window,
    unit: 'C',
    layer: isSite ? 'site' : 'ceiling',
    source: isSite ? 'site protocol' : ceiling.source,
  });
}

export function charge24hReasons(context: ClearanceContext): Reason[] {
  if (!isPrescribed(context)) return [];
  const site = context.known.some('site', context.facts.site);
  const limit = context.known.amount('site.max_24h_C', site?.maxCharge24hCoulomb);
  return chargeReasons(context, 'charge_24h', limit, ceilings.charge24hCoulomb, dayWindow);
}

export function charge7dReasons(context: ClearanceContext): Reason[] {
  if (!isPrescribed(context)) return [];
  const site = context.known.some('site', context.facts.site);
  const limit = context.known.amount('site.max_7d_C', site?.maxCharge7dCoulomb);
  return chargeReasons(context, 'charge_7d', limit, ceilings.charge7dCoulomb, weekWindow);
}
