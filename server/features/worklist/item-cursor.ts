// The cursor of the worklist: its sort keys, checked when they come back. Sorts nothing.

import { decodeCursor, encodeCursor } from '@/db/queries/cursor';
import type { ItemPosition, ItemRecord } from '@/db/queries/worklist';
import { worklistLevels } from '@/shared/values/codes';
import { positionOf } from '@/shared/values/list-position';

export function cursorOf(item: ItemRecord): string {
  return encodeCursor([item.ownerAccountId === null ? 'nobody' : 'owned', item.level, item.openedAt, item.id]);
}

/** Null without a cursor, undefined for one that this list did not make. */
export function positionAfter(cursor: string | undefined): ItemPosition | null | undefined {
  if (cursor === undefined) return null;
  const [owned, word, ...rest] = decodeCursor(cursor) ?? [];
  const level = worklistLevels.find((known) => known === word);
  const position = positionOf(rest);
  if (level === undefined || position === undefined || (owned !== 'nobody' && owned !== 'owned')) return undefined;
  return { isOwned: owned === 'owned', level, openedAt: position.at, id: position.id };
}
