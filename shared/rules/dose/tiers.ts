// The one comparison that most rows of a dose share: routine limit, the site's limit, ceiling. Above all of them a
// dose is refused, never clamped.

import type { DoseQuantity, LimitLayer, Tier } from '@/shared/values/codes';
import { atMost, isBelow } from '@/shared/values/units';
import type { SiteLimits } from '@/shared/values/protocol-settings';
import type { Ceiling } from '../ceilings';
import { defaultSiteLimits } from '../site-limits';
import type { DoseRow } from './facts';

/** Citation of a limit that a site's own signed protocol sets. */
export const siteSource = 'site protocol';

type NumericField = Exclude<keyof SiteLimits, 'allowsRings' | 'minorCurrentMilliamp'>;

export function routineLayer(limits: SiteLimits, field: NumericField): LimitLayer {
  return limits[field] === defaultSiteLimits[field] ? 'default' : 'site';
}

/** A row with an upper bound in three layers. A site's limit above the ceiling is none: the ceiling holds. */
export function rowUpTo(
  quantity: DoseQuantity,
  value: number | undefined,
  limits: SiteLimits,
  fields: { readonly routine: NumericField; readonly most: NumericField },
  ceiling: Ceiling,
  electrode?: string,
): DoseRow[] {
  if (value === undefined) return [];
  const siteLimit = Math.min(limits[fields.most], ceiling.value);
  const routineLimit = Math.min(limits[fields.routine], siteLimit);
  const isTightened = isBelow(siteLimit, ceiling.value);
  const tier: Tier = atMost(value, routineLimit) ? 'accept' : atMost(value, siteLimit) ? 'second_signature' : 'refuse';
  const layer: LimitLayer =
    tier === 'refuse' ? (isTightened ? 'site' : 'ceiling') : routineLayer(limits, fields.routine);
  const source = layer === 'site' ? siteSource : layer === 'ceiling' ? ceiling.source : 'own choice';
  return [
    {
      quantity,
      tier,
      value,
      unit: ceiling.unit,
      routineLimit,
      siteLimit,
      ceiling: ceiling.value,
      direction: 'at_most',
      layer,
      source,
      electrode,
    },
  ];
}
