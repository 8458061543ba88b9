/**
 * One tab stop for a group, arrows within it, as people who work by keyboard expect of radio buttons and rows. It must
 * not decide what choosing means; it only says which one is next.
 */
import { useRef, type KeyboardEvent } from 'react';
import type { View } from 'react-native';

export interface Roving {
  ref(index: number): (node: View | null) => void;
  focus(index: number): void;
  /** Returns the index that the key leads to, or null where the key is none of ours. */
  next(event: KeyboardEvent, index: number, count: number): number | null;
}

function isRightToLeft(event: KeyboardEvent): boolean {
  return event.currentTarget instanceof Element && getComputedStyle(event.currentTarget).direction === 'rtl';
}

export function useRoving(): Roving {
  const nodes = useRef(new Map<number, View>());
  return {
    ref: (index) => (node) => {
      if (node) nodes.current.set(index, node);
      else nodes.current.delete(index);
    },
    focus: (index) => nodes.current.get(index)?.focus(),
    next: (event, index, count) => {
      const turned = isRightToLeft(event);
      const forward = event.key === 'ArrowDown' || event.key === (turned ? 'ArrowLeft' : 'ArrowRight');
      const backward = event.key === 'ArrowUp' || event.key === (turned ? 'ArrowRight' : 'ArrowLeft');
      if (forward) return (index + 1) % count;
      if (backward) return (index - 1 + count) % count;
      if (event.key === 'Home') return 0;
      if (event.key === 'End') return count - 1;
      return null;
    },
  };
}
