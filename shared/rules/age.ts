// Age on a local day. Decides nothing about what a minor may have.

import { isDate } from '@/shared/values/zone';

/**
 * Full years on a local day; undefined if either day is none. Whoever was born on 29 February is a year older on
 * 1 March in common years (own choice; local law may say 28 February).
 */
export function ageYearsOn(bornOn: string, localDay: string): number | undefined {
  if (!isDate(bornOn) || !isDate(localDay) || bornOn > localDay) return undefined;
  const years = Number(localDay.slice(0, 4)) - Number(bornOn.slice(0, 4));
  return localDay.slice(5) >= bornOn.slice(5) ? years : years - 1;
}
