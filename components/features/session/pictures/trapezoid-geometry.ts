/**
 * Where the lines of a session's trapezoid run: from seconds to places on paper, for the run, the dose and the mark. It
 * must not know colours, words or what the session is doing.
 */

export interface DoseShape {
  rampUpSeconds: number;
  holdSeconds: number;
  rampDownSeconds: number;
}

export interface Frame {
  width: number;
  height: number;
  /** Smallest share of the width that a ramp takes; a ramp of 30 s in 20 minutes would be a hair. 0 = to scale. */
  leastRampShare: number;
}

export interface Trapezoid {
  /** Widths on paper. */
  rampUpWidth: number;
  holdWidth: number;
  rampDownWidth: number;
  totalSeconds: number;
  /** Where a second of the session lies on paper. */
  x(seconds: number): number;
  /** Height of the curve at a place on paper, as a share of its full height. */
  level(x: number): number;
}

const within = (value: number, low: number, high: number) => Math.min(high, Math.max(low, value));

export function trapezoidOf(dose: DoseShape, frame: Frame): Trapezoid {
  const totalSeconds = dose.rampUpSeconds + dose.holdSeconds + dose.rampDownSeconds;
  const share = (seconds: number) => (totalSeconds > 0 ? seconds / totalSeconds : 0);
  const rampUpWidth = Math.max(share(dose.rampUpSeconds), frame.leastRampShare) * frame.width;
  const rampDownWidth = Math.max(share(dose.rampDownSeconds), frame.leastRampShare) * frame.width;
  const holdWidth = Math.max(0, frame.width - rampUpWidth - rampDownWidth);
  const part = (seconds: number, length: number, width: number) =>
    length > 0 ? within(seconds / length, 0, 1) * width : seconds >= length ? width : 0;
  return {
    rampUpWidth,
    holdWidth,
    rampDownWidth,
    totalSeconds,
    x: (seconds) =>
      part(seconds, dose.rampUpSeconds, rampUpWidth) +
      (seconds > dose.rampUpSeconds ? part(seconds - dose.rampUpSeconds, dose.holdSeconds, holdWidth) : 0) +
      (seconds > dose.rampUpSeconds + dose.holdSeconds
        ? part(seconds - dose.rampUpSeconds - dose.holdSeconds, dose.rampDownSeconds, rampDownWidth)
        : 0),
    level: (x) => {
      if (x < rampUpWidth) return within(x / rampUpWidth, 0, 1);
      const left = frame.width - x;
      return left < rampDownWidth ? within(left / rampDownWidth, 0, 1) : 1;
    },
  };
}

const place = (value: number) => Math.round(value * 100) / 100;

/** A closed path from a list of corners. */
export function closedPath(corners: readonly (readonly [number, number])[]): string {
  return `${corners.map(([x, y], index) => `${index === 0 ? 'M' : 'L'}${place(x)} ${place(y)}`).join(' ')} Z`;
}

export interface Drawn {
  /** Left and top edge on paper, foot of the curve, and its height. */
  left: number;
  foot: number;
  rise: number;
}

/** The whole outline. */
export function outlinePath(shape: Trapezoid, frame: Frame, at: Drawn): string {
  const top = at.foot - at.rise;
  return closedPath([
    [at.left, at.foot],
    [at.left + shape.rampUpWidth, top],
    [at.left + shape.rampUpWidth + shape.holdWidth, top],
    [at.left + frame.width, at.foot],
  ]);
}

/** The part up to a place on paper, cut upright there. */
export function filledPath(shape: Trapezoid, frame: Frame, at: Drawn, upTo: number): string {
  const cut = within(upTo, 0, frame.width);
  const top = at.foot - at.rise;
  const corners: [number, number][] = [[at.left, at.foot]];
  if (cut > shape.rampUpWidth) corners.push([at.left + shape.rampUpWidth, top]);
  if (cut > shape.rampUpWidth + shape.holdWidth) corners.push([at.left + shape.rampUpWidth + shape.holdWidth, top]);
  corners.push([at.left + cut, at.foot - at.rise * shape.level(cut)], [at.left + cut, at.foot]);
  return closedPath(corners);
}
