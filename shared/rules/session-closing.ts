// The columns that close a session, from its whole record: whole µC and ms, rounded up. A record without any current closes as unused and
// counts nothing; one with current and no samples counts whole.

import { microcoulombOf, millisecondsOf } from '@/shared/values/units';
import { amountsOf, summaryOf, type RecordedEvent, type SessionAmounts, type SessionSummary } from './session-summary';
import type { TrapezoidFacts } from './dose';

type Dose = TrapezoidFacts & { readonly chargeCoulomb: number; readonly minutes: number };

export function closingOf(dose: Dose, events: readonly RecordedEvent[]) {
  const amounts: SessionAmounts = amountsOf(dose, events);
  const summary: SessionSummary = summaryOf(dose, events, amounts);
  const { delivered, hasRun, deviceOnSeconds, deviceChargeCoulomb } = amounts;
  const plannedMs = millisecondsOf(dose.minutes * 60);
  const upperOnMs = delivered.upperOnSeconds === null ? plannedMs : millisecondsOf(delivered.upperOnSeconds);
  const upperCharge = delivered.upperChargeCoulomb ?? dose.chargeCoulomb;
  return {
    amounts,
    summary,
    row: {
      closedWhy: hasRun ? ('recorded' as const) : ('unused' as const),
      deliveredUc: delivered.chargeCoulomb === null ? null : microcoulombOf(delivered.chargeCoulomb),
      upperUc: hasRun ? microcoulombOf(upperCharge) : 0,
      onMs: millisecondsOf(delivered.onSeconds ?? 0),
      fractionPermille: Math.round((delivered.fraction ?? 0) * 1000),
      completeness: amounts.completeness,
      summary: { ...summary, upperOnMs: hasRun ? upperOnMs : 0, deviceOnSeconds, deviceChargeCoulomb },
    },
  };
}
