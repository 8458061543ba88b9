// The sham of a plan, the same for all waveforms: what is felt at the start, then nothing, in the time of the plan. A current is its
// envelope (peak), so a sine or noise fades as a direct current does. Must not: be told to blinded eyes; they see the plan.

import type { TrapezoidFacts } from './dose/facts';
import type { CurvePoint } from './session';

/** Up to the plan's current and down again at once, then 0 to the plan's end: short ramps (Woodham et al. 2023). */
export function shamCurve(plan: TrapezoidFacts): CurvePoint[] {
  const { intensityMilliamp, rampUpSeconds: up, holdSeconds: hold, rampDownSeconds: down } = plan;
  return [
    { seconds: 0, milliamp: 0 },
    { seconds: up, milliamp: intensityMilliamp },
    { seconds: up + down, milliamp: 0 },
    { seconds: up + hold + down, milliamp: 0 },
  ];
}

/** Its charge in C: two ramps and no hold. */
export function shamChargeOf({ intensityMilliamp, rampUpSeconds, rampDownSeconds }: TrapezoidFacts): number {
  return (intensityMilliamp * (rampUpSeconds + rampDownSeconds)) / 2 / 1000;
}
