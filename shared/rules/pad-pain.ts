// What is felt during a run that stops it: pain at a pad, by the sensation named and how strong. The phone acts on it at once, without a
// network; the server opens the lockout by the same words.

import { effectKinds, type EffectKind } from '@/shared/values/codes';
import { lockoutsAfterDiary } from './lockout';

/** Sensations that are pain at a pad when strong. Burning under a pad is the forerunner of a burn (own choice). */
export const padPainKinds: readonly EffectKind[] = ['scalp_pain', 'burning'];

/** Strength as pain at a pad, 0 to 10; undefined for a sensation that is elsewhere. */
export function padPainOf(sensation: string, strength: number): number | undefined {
  const kind = effectKinds.find((each) => each === sensation);
  return kind !== undefined && padPainKinds.includes(kind) ? strength : undefined;
}

/** True if the run must go down now because of this sensation. */
export function sensationStopsRun(sensation: string, strength: number): boolean {
  return lockoutsAfterDiary({ during: { painAtPad: padPainOf(sensation, strength) } }).deviceAction === 'ramp_down';
}
