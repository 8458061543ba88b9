/**
 * What a mark of the course strip is made of, in every size: paths and lines on its own small paper, by state alone. It
 * must not know colours (it names roles), words, or what a session was.
 */

export type MarkState =
  'delivered' | 'partial' | 'planned' | 'next' | 'missed' | 'held' | 'running' | 'excused' | 'cancelled';

export type StripSize = 'row' | 'card' | 'page' | 'mail';

export interface StripMeasure {
  width: number;
  height: number;
  /** Between marks, and between weeks. */
  gap: number;
  weekGap: number;
  line: number;
}

/** Own choice: the smallest is still told apart at arm's length, the largest has room for a fingertip above and below. */
export const stripMeasures: Record<StripSize, StripMeasure> = {
  row: { width: 15, height: 9, gap: 3, weekGap: 9, line: 1.25 },
  card: { width: 20, height: 12, gap: 4, weekGap: 12, line: 1.5 },
  page: { width: 32, height: 18, gap: 5, weekGap: 14, line: 1.5 },
  mail: { width: 18, height: 11, gap: 4, weekGap: 10, line: 1.5 },
};

/** Share of the width that a ramp takes; the same slope as the product's mark (6 of 32). */
const rampShare = 0.1875;

/** Names of colours in the theme that a mark may take. */
export type MarkRole = 'steady' | 'muted' | 'action' | 'stop';

export type MarkPart =
  | { kind: 'fill'; d: string; role: MarkRole }
  | { kind: 'stroke'; d: string; role: MarkRole; width: number; dashed?: boolean }
  | { kind: 'dot'; cx: number; cy: number; r: number; role: MarkRole }
  | { kind: 'ring'; cx: number; cy: number; r: number; role: MarkRole; width: number };

export interface MarkInput {
  state: MarkState;
  /** Delivered share, 0–1. */
  fraction?: number;
}

const place = (value: number) => Math.round(value * 100) / 100;
const corner = (x: number, y: number) => `${place(x)} ${place(y)}`;

/** The outline, drawn inside its paper so that its line is not cut. */
function outline({ width, height }: StripMeasure, inset: number): string {
  const ramp = width * rampShare;
  return `M${corner(inset, height - inset)} L${corner(ramp, inset)} L${corner(width - ramp, inset)} L${corner(width - inset, height - inset)} Z`;
}

/** The same, filled from the start up to a share of its time, cut upright. */
function cut({ width, height }: StripMeasure, share: number): string {
  const ramp = width * rampShare;
  const x = Math.min(1, Math.max(0, share)) * width;
  const level = x < ramp ? x / ramp : x > width - ramp ? (width - x) / ramp : 1;
  const corners = [corner(0, height)];
  if (x > ramp) corners.push(corner(ramp, 0));
  if (x > width - ramp) corners.push(corner(width - ramp, 0));
  corners.push(corner(x, height * (1 - level)), corner(x, height));
  return `M${corners.join(' L')} Z`;
}

export function markParts(mark: MarkInput, measure: StripMeasure): MarkPart[] {
  const { width, height, line } = measure;
  const inset = line / 2;
  const middle = { cx: width / 2, cy: height * 0.62 };
  switch (mark.state) {
    case 'delivered':
      return [{ kind: 'fill', d: cut(measure, 1), role: 'steady' }];
    case 'partial':
      return [
        { kind: 'fill', d: cut(measure, mark.fraction ?? 0), role: 'steady' },
        { kind: 'stroke', d: outline(measure, inset), role: 'steady', width: line },
      ];
    case 'running':
      return [
        { kind: 'fill', d: cut(measure, mark.fraction ?? 0), role: 'action' },
        { kind: 'stroke', d: outline(measure, inset), role: 'action', width: line },
      ];
    case 'next':
      return [{ kind: 'stroke', d: outline(measure, line * 0.75), role: 'action', width: line * 1.5 }];
    case 'planned':
      return [{ kind: 'stroke', d: outline(measure, inset), role: 'muted', width: line }];
    case 'held':
      return [
        { kind: 'stroke', d: outline(measure, inset), role: 'stop', width: line },
        { kind: 'stroke', d: `M${corner(0, height * 0.56)} H${place(width)}`, role: 'stop', width: line * 1.5 },
      ];
    case 'missed':
      return [{ kind: 'dot', ...middle, r: Math.max(1.75, height * 0.15), role: 'muted' }];
    case 'excused':
      return [{ kind: 'ring', ...middle, r: Math.max(2, height * 0.18), role: 'muted', width: line * 0.8 }];
    case 'cancelled':
      return [
        {
          kind: 'stroke',
          d: `M${corner(width * 0.32, middle.cy)} H${place(width * 0.68)}`,
          role: 'muted',
          width: line,
        },
      ];
  }
}

/** Weeks stay together and the row wraps between them. Without marked weeks, five to a group: the usual weekdays. */
export function weeksOf<Mark extends { weekStart?: boolean }>(marks: readonly Mark[]): Mark[][] {
  const hasWeeks = marks.some((mark) => mark.weekStart);
  const weeks: Mark[][] = [];
  for (const [index, mark] of marks.entries()) {
    const opens = hasWeeks ? index === 0 || mark.weekStart === true : index % 5 === 0;
    const last = weeks[weeks.length - 1];
    if (opens || !last) weeks.push([mark]);
    else last.push(mark);
  }
  return weeks;
}
