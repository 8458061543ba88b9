/**
 * Which labels of a trend fit, and where its scale ends. It must not know colours or words.
 */

export interface TrendPoint {
  /** Milliseconds of an instant. */
  at: number;
  /** null: nothing was recorded, which is not zero. */
  value: number | null;
}

export interface TimeAxis {
  left: number;
  width: number;
  from: number;
  until: number;
}

export function xOf(at: number, axis: TimeAxis): number {
  const span = axis.until - axis.from;
  return axis.left + (span > 0 ? ((at - axis.from) / span) * axis.width : axis.width / 2);
}

/** Ends of a scale that read easily: these, times a power of ten. Own choice. */
const easySteps = [1, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10];

/** The next easy number at or above the largest value, as the end of a scale. */
export function easyEnd(largest: number): number {
  const power = 10 ** Math.floor(Math.log10(largest));
  const step = easySteps.find((one) => one * power >= largest) ?? 10;
  return step * power;
}

/** Which labels of time fit without touching: always the first, then each that leaves room. */
export function fittingLabels<Label extends { at: number }>(
  labels: readonly Label[],
  axis: TimeAxis,
  room: number,
): Label[] {
  const shown: Label[] = [];
  let end = -Infinity;
  for (const label of labels) {
    const x = xOf(label.at, axis);
    if (x - room / 2 < end) continue;
    shown.push(label);
    end = x + room / 2;
  }
  return shown;
}
