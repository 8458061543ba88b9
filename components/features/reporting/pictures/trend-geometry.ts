/**
 * Where the points of a trend lie: several rows over one axis of time. It must not know colours or words, and never
 * joins two points across one that was not recorded.
 */

export interface TrendPoint {
  /** Milliseconds of an instant. */
  at: number;
  /** null: nothing was recorded, which is not zero. */
  value: number | null;
}

export interface RowFrame {
  left: number;
  width: number;
  top: number;
  height: number;
  from: number;
  until: number;
  low: number;
  high: number;
}

export interface Placed {
  x: number;
  y: number;
}

export function xOf(at: number, frame: RowFrame): number {
  const span = frame.until - frame.from;
  return frame.left + (span > 0 ? ((at - frame.from) / span) * frame.width : frame.width / 2);
}

export function yOf(value: number, frame: RowFrame): number {
  const span = frame.high - frame.low;
  const share = span > 0 ? Math.min(1, Math.max(0, (value - frame.low) / span)) : 0;
  return frame.top + frame.height * (1 - share);
}

/** Ends of a scale that read easily: these, times a power of ten. Own choice. */
const easySteps = [1, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10];

/** The next easy number at or above the largest value, as the end of a scale. */
export function easyEnd(largest: number): number {
  const power = 10 ** Math.floor(Math.log10(largest));
  const step = easySteps.find((one) => one * power >= largest) ?? 10;
  return step * power;
}

/** Unbroken runs of recorded points. */
export function runsOf(points: readonly TrendPoint[], frame: RowFrame): Placed[][] {
  const runs: Placed[][] = [];
  let open: Placed[] = [];
  for (const point of points) {
    if (point.value === null) {
      if (open.length > 0) runs.push(open);
      open = [];
      continue;
    }
    open.push({ x: xOf(point.at, frame), y: yOf(point.value, frame) });
  }
  if (open.length > 0) runs.push(open);
  return runs;
}

const place = (value: number) => Math.round(value * 10) / 10;

export function linePath(run: readonly Placed[]): string {
  return run.map((point, index) => `${index === 0 ? 'M' : 'L'}${place(point.x)} ${place(point.y)}`).join(' ');
}

/** Which labels of time fit without touching: always the first, then each that leaves room. */
export function fittingLabels<Label extends { at: number }>(
  labels: readonly Label[],
  frame: RowFrame,
  room: number,
): Label[] {
  const shown: Label[] = [];
  let end = -Infinity;
  for (const label of labels) {
    const x = xOf(label.at, frame);
    if (x - room / 2 < end) continue;
    shown.push(label);
    end = x + room / 2;
  }
  return shown;
}
