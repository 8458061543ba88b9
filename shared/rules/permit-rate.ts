// How many permits may be given out to one person in an hour. Counts permits, not requests.

import { hourMilliseconds } from '@/shared/values/units';
import { isoOf, parseInstant } from '@/shared/values/zone';
import { mostPermitsPerHour } from './house-limits';

export const permitsPerHour = {
  /** Permits issued after this count. */
  since: (now: string): string => isoOf((parseInstant(now) ?? Number.NaN) - hourMilliseconds),
  allows: (issued: number): boolean => issued < mostPermitsPerHour,
};
