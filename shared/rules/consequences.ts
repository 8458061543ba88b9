// What findings lead to on record: lockouts to store, rows for the worklist, whether staff are paged and a live permit ends. The findings
// themselves come from lockout.ts, precheck.ts, worklist.ts and adherence.ts; this only spells them out.

import { minuteMilliseconds } from '@/shared/values/units';
import { isoOf, parseInstant } from '@/shared/values/zone';
import type { WorklistLevel } from '@/shared/values/codes';
import { escalationMinutes } from './house-limits';

export type Finding = {
  readonly code: string;
  /** hold: ends by itself, nobody has to look. flag, look, due: for the worklist alone. */
  readonly level: 'safety' | 'review' | 'device' | 'hold' | 'flag' | 'look' | 'due';
  /** Of a hold. */
  readonly until?: string;
  /** Staff are told now, and again until somebody acknowledges. */
  readonly isPaged?: boolean;
  /** Codes and numbers for the row's sentence. */
  readonly facts?: Readonly<Record<string, string | number | boolean | null>>;
  /** What a row without a lockout is about; at most one is open. The code if absent. */
  readonly matter?: string;
};
export type Occasion = {
  readonly participantId: string;
  readonly siteId: string;
  readonly source: 'precheck' | 'diary' | 'session';
  readonly sourceId: string;
  readonly sessionId: string | null;
  readonly at: string;
};
export type LockoutToStore = {
  id: string;
  participantId: string;
  level: 'safety' | 'review' | 'device' | 'hold';
  code: string;
  source: Occasion['source'];
  sourceId: string;
  openedAt: string;
  until: string | null;
};
export type ItemToOpen = {
  id: string;
  siteId: string;
  participantId: string;
  level: WorklistLevel;
  why: string;
  facts: Readonly<Record<string, string | number | boolean | null>>;
  matter: string;
  sessionId: string | null;
  lockoutId: string | null;
  openedAt: string;
  escalateAt: string | null;
};
export type Consequences = {
  readonly lockouts: readonly LockoutToStore[];
  readonly items: readonly ItemToOpen[];
  /** Rows whose first contact is told now. */
  readonly paged: readonly ItemToOpen[];
  /** Whatever locks ends a live permit at once. */
  readonly endsPermit: boolean;
};

/** When the next contact is told, unless somebody acknowledges before. */
export function escalationAfter(at: string): string {
  return isoOf((parseInstant(at) ?? Number.NaN) + escalationMinutes * minuteMilliseconds);
}

function lockoutOf({ code, level, until }: Finding, occasion: Occasion, id: string): LockoutToStore | null {
  if (level === 'flag' || level === 'look' || level === 'due') return null;
  const { participantId, source, sourceId, at } = occasion;
  // A hold whose end is not known is not a hold: somebody has to look.
  const isHold = level === 'hold' && until !== undefined;
  const kept = level === 'hold' && !isHold ? 'review' : level;
  return { id, participantId, level: kept, code, source, sourceId, openedAt: at, until: isHold ? until : null };
}

/**
 * @param known codes that are locked already, or were because of the same occasion: said twice it is one effect
 * @param newId makes the ids; chance is not this module's
 */
export function consequencesOf(
  findings: readonly Finding[],
  occasion: Occasion,
  known: readonly { readonly code: string; readonly level: string }[],
  newId: () => string,
): Consequences {
  const lockouts: LockoutToStore[] = [];
  const items: ItemToOpen[] = [];
  for (const finding of findings) {
    const { code, level, facts = {}, matter = code, isPaged = false } = finding;
    const lockout = lockoutOf(finding, occasion, newId());
    const isKnown = known.some((each) => each.code === code && each.level === level && level !== 'hold');
    if (lockout !== null && isKnown) continue;
    if (lockout !== null) lockouts.push(lockout);
    if (level === 'hold' && lockout?.level === 'hold') continue;
    items.push({
      id: newId(),
      siteId: occasion.siteId,
      participantId: occasion.participantId,
      level: level === 'hold' ? 'review' : level,
      why: code,
      facts,
      matter: lockout === null ? matter : `lockout:${lockout.id}`,
      sessionId: occasion.sessionId,
      lockoutId: lockout?.id ?? null,
      openedAt: occasion.at,
      escalateAt: isPaged ? escalationAfter(occasion.at) : null,
    });
  }
  return {
    lockouts,
    items,
    paged: items.filter(({ escalateAt }) => escalateAt !== null),
    endsPermit: lockouts.length > 0,
  };
}

export type PageContact = { readonly name: string; readonly email: string };
export type Page = {
  readonly kind: 'page';
  readonly toEmail: string;
  readonly language: string;
  readonly facts: { readonly name: string; readonly siteName: string; readonly code: string; readonly path: string };
  readonly key: string;
  readonly urgent: true;
};

/**
 * The page of a step: round and round the protocol's list, one mail a row and step. It names nothing but the site and the participant's
 * code; null without contacts.
 */
export function pageAt(
  contacts: readonly PageContact[],
  about: { readonly itemId: string; readonly siteName: string; readonly code: string },
  step: number,
): Page | null {
  const contact = contacts[step % Math.max(contacts.length, 1)];
  if (contact === undefined) return null;
  return {
    kind: 'page',
    toEmail: contact.email,
    language: 'en',
    facts: { name: contact.name, siteName: about.siteName, code: about.code, path: '/worklist' },
    key: `page:${about.itemId}:${step}`,
    urgent: true,
  };
}

/** The first page of each row that is paged. */
export function firstPages(
  { paged }: Consequences,
  contacts: readonly PageContact[],
  site: { readonly siteName: string; readonly code: string },
): Page[] {
  return paged.flatMap(({ id }) => pageAt(contacts, { itemId: id, ...site }, 0) ?? []);
}
