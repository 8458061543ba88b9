/**
 * Where the positions of the 10-10 system lie on a head drawn as a circle, nose up, seen from above: x to the wearer's
 * right, y to the front, the ears' line at radius 1. It must not be used to place an electrode: it is a picture.
 *
 * Computed, not copied. The scalp is taken as a half sphere. By the 10-10 rule (Jurcak, Tsuzuki and Dan 2007 describe
 * it) distances are tenths of the arcs nasion–inion and ear–ear, here 18° each; the outermost ring is 72° from Cz. The
 * positions between a ring position and the midline divide the great circle between them evenly, which the rule does
 * along a slightly different curve: at most a few degrees off, too little to see. The projection (own choice) keeps
 * angles from Cz as distances.
 */

export interface Vector {
  /** To the wearer's right. */
  x: number;
  /** To the front. */
  y: number;
  /** Up. */
  z: number;
}

const degree = Math.PI / 180;
const tenth = 18 * degree;
const ringAngle = 4 * tenth;

/** A point of the sphere: angle from Cz, and angle from the front towards the right. */
function onSphere(fromTop: number, fromFront: number): Vector {
  return {
    x: Math.sin(fromTop) * Math.sin(fromFront),
    y: Math.sin(fromTop) * Math.cos(fromFront),
    z: Math.cos(fromTop),
  };
}

/** The point that divides the great circle from a to b at a share. */
function between(a: Vector, b: Vector, share: number): Vector {
  const angle = Math.acos(Math.min(1, a.x * b.x + a.y * b.y + a.z * b.z));
  const left = Math.sin((1 - share) * angle) / Math.sin(angle);
  const right = Math.sin(share * angle) / Math.sin(angle);
  return { x: left * a.x + right * b.x, y: left * a.y + right * b.y, z: left * a.z + right * b.z };
}

/** Rows from front to back: name on the midline, its tenths from Cz (front positive), its ring position's tenths from Fpz. */
const rows = [
  { row: 'Fp', middle: 4, ring: 1, outer: '1', between: [] },
  { row: 'AF', middle: 3, ring: 2, outer: '7', between: ['3'] },
  { row: 'F', middle: 2, ring: 3, outer: '7', between: ['5', '3', '1'] },
  { row: 'FC', middle: 1, ring: 4, outer: 'FT7', between: ['5', '3', '1'] },
  { row: 'C', middle: 0, ring: 5, outer: 'T7', between: ['5', '3', '1'] },
  { row: 'CP', middle: -1, ring: 6, outer: 'TP7', between: ['5', '3', '1'] },
  { row: 'P', middle: -2, ring: 7, outer: '7', between: ['5', '3', '1'] },
  { row: 'PO', middle: -3, ring: 8, outer: '7', between: ['3'] },
  { row: 'O', middle: -4, ring: 9, outer: '1', between: [] },
] as const;

/** Odd numbers are on the left, the even one after each on the right. */
function rightNameOf(leftName: string): string {
  return leftName.replace(/\d+$/, (digits) => String(Number(digits) + 1));
}

function buildVectors(): ReadonlyMap<string, Vector> {
  const vectors = new Map<string, Vector>();
  const addPair = (leftName: string, left: Vector) => {
    vectors.set(leftName, left);
    vectors.set(rightNameOf(leftName), { ...left, x: -left.x });
  };
  for (const { row, middle, ring, outer, between: inner } of rows) {
    const centre = onSphere(Math.abs(middle) * tenth, middle >= 0 ? 0 : Math.PI);
    vectors.set(`${row}z`, centre);
    const edge = onSphere(ringAngle, -ring * tenth);
    addPair(outer.length > 1 ? outer : `${row}${outer}`, edge);
    inner.forEach((digit, index) => addPair(`${row}${digit}`, between(edge, centre, (index + 1) / (inner.length + 1))));
  }
  return vectors;
}

const vectors = buildVectors();

export const positionNames: readonly string[] = [...vectors.keys()];

/** Case does not matter: FP2 and Fp2 are one place. */
function vectorOf(name: string): Vector | undefined {
  const known = positionNames.find((candidate) => candidate.toLowerCase() === name.toLowerCase());
  return known === undefined ? undefined : vectors.get(known);
}

export interface PaperPlace {
  x: number;
  y: number;
}

/** Seen from above, nose up; on the unit disc, y to the front. */
export function placeFromAbove(name: string): PaperPlace | undefined {
  const vector = vectorOf(name);
  if (!vector) return undefined;
  const flat = Math.hypot(vector.x, vector.y);
  const distance = Math.acos(Math.min(1, vector.z)) / (90 * degree);
  return flat === 0 ? { x: 0, y: 0 } : { x: (vector.x / flat) * distance, y: (vector.y / flat) * distance };
}

/** Seen from the front as in a mirror, so that left stays left; undefined for what lies behind. y is up. */
export function placeFromFront(name: string): PaperPlace | undefined {
  const vector = vectorOf(name);
  if (!vector || vector.y < -0.01) return undefined;
  return { x: vector.x, y: vector.z };
}
