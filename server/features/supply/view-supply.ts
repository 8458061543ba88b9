// A lot of supplies as the contract shows it.

import type { SupplyRecord } from '@/db/queries/supply';
import { localDate, parseInstant } from '@/shared/values/zone';

export function viewSupply(supply: SupplyRecord, zone: string) {
  const { id, kind, lot, uses, maxUses, maxDays, closedAt, openedAt } = supply;
  const opened = parseInstant(openedAt);
  const openedOn = opened === undefined ? '' : localDate(opened, zone);
  return { id, kind, lot, openedOn, uses, maxUses, maxDays, endedAt: closedAt };
}
