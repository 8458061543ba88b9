// Wilson score interval of a share (Wilson 1927), without continuity correction.

export type Interval = { readonly low: number; readonly high: number };
/** z of 95 %. */
export const z95 = 1.959963984540054;
export declare function wilson(successes: number, trials: number, z?: number): Interval | null;
