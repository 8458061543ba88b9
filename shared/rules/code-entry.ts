// A one-time code typed into a stimulator without a radio: taken, or refused with how long to wait. A weaker control than a signed permit:
// a code has no end, cannot be voided, and says nothing of the dose. Keeps nothing: the caller keeps the entry that comes back.

import { counterOfCode } from './hotp';

/**
 * - digits: the most that RFC 4226 §5.3 names, since a lucky guess gives current.
 * - window: RFC 4226 §7.4 wants it small; so many permits may be given and not typed before staff set the stimulator up again.
 * - waits and tries: RFC 4226 §7.3, the longer after each wrong code, and in the end not without staff.
 * Ten tries over a window of ten codes of 8 digits: a guesser succeeds once in a million. Own choices.
 */
export const codeEntryBounds = { digits: 8, window: 10, waitSecondsPerWrong: 5, mostWrong: 10 } as const;

export interface CodeEntry {
  /** The first counter whose code was not used yet; moves only upwards. */
  readonly nextCounter: number;
  readonly wrongInARow: number;
  /** On the stimulator's own clock. */
  readonly waitUntilSeconds: number;
}
export type CodeAnswer =
  | { readonly accepted: true; readonly counter: number; readonly entry: CodeEntry }
  | {
      readonly accepted: false;
      readonly why: 'code_wrong' | 'code_wait' | 'code_locked';
      readonly waitSeconds: number;
      readonly entry: CodeEntry;
    };

export function freshEntry(nextCounter: number): CodeEntry {
  return { nextCounter, wrongInARow: 0, waitUntilSeconds: 0 };
}

/** Digits as people type them, with or without a space. */
function digitsOf(typed: string): string {
  return typed.replace(/\s/g, '');
}

export function enterCode(secret: Uint8Array, typed: string, entry: CodeEntry, nowSeconds: number): CodeAnswer {
  const { digits, window, waitSecondsPerWrong, mostWrong } = codeEntryBounds;
  const { nextCounter, wrongInARow, waitUntilSeconds } = entry;
  const refused = (why: 'code_wrong' | 'code_wait' | 'code_locked', changed: CodeEntry): CodeAnswer => {
    return { accepted: false, why, waitSeconds: Math.max(0, changed.waitUntilSeconds - nowSeconds), entry: changed };
  };
  if (wrongInARow >= mostWrong) return refused('code_locked', entry);
  // A clock that cannot be read makes nobody wait less.
  if (!(nowSeconds >= waitUntilSeconds)) return refused('code_wait', entry);
  const counter = counterOfCode(secret, digitsOf(typed), { firstCounter: nextCounter, window, digits });
  if (counter !== null) return { accepted: true, counter, entry: freshEntry(counter + 1) };
  const wrong = wrongInARow + 1;
  const changed = { nextCounter, wrongInARow: wrong, waitUntilSeconds: nowSeconds + wrong * waitSecondsPerWrong };
  return refused(wrong >= mostWrong ? 'code_locked' : 'code_wrong', changed);
}
