// The sentence of one entry of the timeline, from its kind, word and facts.

import type { TFunction } from 'i18next';
import type { Format } from '@/components/runtime/format';
import type { TimelineEntry } from '@/shared/contracts/participant';

/** Facts as words: codes become words, numbers are written in the reader's way. */
export function sentenceOfEntry(entry: TimelineEntry, format: Format, t: TFunction): string {
  const facts: Record<string, string> = {};
  for (const [name, value] of Object.entries(entry.facts)) {
    if (typeof value === 'number') facts[name] = format.number(value, name.toLowerCase().includes('minutes') ? 0 : undefined);
    else if (typeof value === 'string') facts[name] = value;
  }
  if (facts.code) facts.what = t(`worklist:why.${facts.code}`);
  const word = facts.outcome ?? facts.decision ?? facts.completeness ?? facts.event ?? facts.page;
  const keys = word ? [`participants:timeline.kind.${entry.kind}_${word}`, `participants:timeline.kind.${entry.kind}`] : [`participants:timeline.kind.${entry.kind}`];
  return t(keys, facts);
}
