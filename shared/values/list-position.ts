// Where a page of a list sorted by instant and id ended, read back from its cursor. Holds no sort order of its own.

import { parseInstant } from './zone';

export interface ListPosition {
  at: string;
  id: string;
}

const uuidForm = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;

/** True for an id that the database takes as one. */
export function isUuid(value: unknown): value is string {
  return typeof value === 'string' && uuidForm.test(value);
}

/** True for an instant that the database takes as one. */
export function isInstant(value: unknown): value is string {
  return typeof value === 'string' && parseInstant(value) !== undefined;
}

/** The position of an instant and an id; undefined for whatever this list did not make. */
export function positionOf(values: readonly unknown[] | null): ListPosition | undefined {
  if (values === null || values.length !== 2) return undefined;
  const [at, id] = values;
  return isInstant(at) && isUuid(id) ? { at, id } : undefined;
}

export interface TextPosition {
  text: string;
  id: string;
}

/** The position of a name, code or label and an id; undefined for whatever this list did not make. */
export function textPositionOf(values: readonly unknown[] | null): TextPosition | undefined {
  if (values === null || values.length !== 2) return undefined;
  const [text, id] = values;
  return typeof text === 'string' && isUuid(id) ? { text, id } : undefined;
}
