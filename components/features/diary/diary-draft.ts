// A diary while it is being written: every answer open until it is given, "nothing" chosen and never assumed. It turns into the contract's
// body only when whole.

import { z } from 'zod';
import type { BodyIn } from '@/shared/contracts/contract';
import type { writeDiary } from '@/shared/contracts/session';
import { skinChoices } from '@/shared/rules/lockout';
import { effectKinds, redFlags, type EffectKind } from '@/shared/values/codes';

export type DiaryKind = 'after' | 'next_day';
const strength = z.number().int().min(0).max(10);

export const DiaryDraft = z.object({
  /** The idempotency key: one a diary. */
  key: z.string(),
  page: z.number().int().min(0),
  nothingFelt: z.boolean(),
  effects: z.array(
    z.object({ kind: z.enum(effectKinds), strength: strength.min(1).nullable(), stillThere: z.boolean().nullable() }),
  ),
  headache: strength.nullable(),
  skin: z.enum(skinChoices).nullable(),
  rednessStillThere: z.boolean().nullable(),
  /** null = not answered; empty = none of these. */
  redFlags: z.array(z.enum(redFlags)).nullable(),
  freeText: z.string().max(2000),
});
export type DiaryDraft = z.infer<typeof DiaryDraft>;
export type DiaryBody = BodyIn<typeof writeDiary>;

/** Phosphenes and dizziness are asked with alternating current only. */
const alternatingOnly: readonly EffectKind[] = ['phosphenes', 'dizziness'];
export const askedEffects = effectKinds.filter((kind) => !alternatingOnly.includes(kind));

export const pagesOf = {
  after: ['felt', 'headache', 'skin', 'flags'],
  next_day: ['redness', 'headache', 'flags'],
} as const;
export type DiaryPage = (typeof pagesOf)[DiaryKind][number];

export function freshDraft(): DiaryDraft {
  return {
    key: crypto.randomUUID(),
    page: 0,
    nothingFelt: false,
    effects: [],
    headache: null,
    skin: null,
    rednessStillThere: null,
    redFlags: null,
    freeText: '',
  };
}

export function isPageAnswered(draft: DiaryDraft, page: DiaryPage): boolean {
  switch (page) {
    case 'felt':
      return (
        draft.nothingFelt ||
        (draft.effects.length > 0 &&
          draft.effects.every((effect) => effect.strength !== null && effect.stillThere !== null))
      );
    case 'headache':
      return draft.headache !== null;
    case 'skin':
      return draft.skin !== null;
    case 'redness':
      return draft.rednessStillThere !== null;
    case 'flags':
      return draft.redFlags !== null;
  }
}

/** Choosing a sensation adds it open; taking it away forgets its strength. */
export function withEffects(draft: DiaryDraft, kinds: readonly EffectKind[], nothingFelt: boolean): DiaryDraft {
  const effects = kinds.map(
    (kind) => draft.effects.find((effect) => effect.kind === kind) ?? { kind, strength: null, stillThere: null },
  );
  return { ...draft, nothingFelt, effects: nothingFelt ? [] : effects };
}

/** The body to send; null while something is open. */
export function bodyOf(draft: DiaryDraft, kind: DiaryKind, isPhotoAdded: boolean): DiaryBody | null {
  if (!pagesOf[kind].every((page) => isPageAnswered(draft, page))) return null;
  const { headache, skin, rednessStillThere, redFlags: flags } = draft;
  const text = draft.freeText.trim();
  const freeText = text === '' ? {} : { freeText: text };
  if (headache === null || flags === null) return null;
  if (kind === 'next_day') {
    if (rednessStillThere === null) return null;
    return { kind, answers: { rednessStillThere, headacheNextDay: headache, redFlags: flags, ...freeText } };
  }
  if (skin === null) return null;
  const effects = draft.effects.flatMap((effect) =>
    effect.strength === null || effect.stillThere === null
      ? []
      : [{ kind: effect.kind, strength: effect.strength, stillThere: effect.stillThere }],
  );
  const photoOffered = isPhotoAdded ? { photoOffered: true } : {};
  return {
    kind,
    answers: {
      nothingFelt: draft.nothingFelt,
      effects,
      headacheAfter: headache,
      skin,
      redFlags: flags,
      ...freeText,
      ...photoOffered,
    },
  };
}

/** The first thing that asks for help now, however it was said; null while nothing does. */
export function urgentOf(draft: DiaryDraft): string | null {
  return draft.redFlags?.[0] ?? (draft.skin === 'broken_or_blistered' ? 'burn_or_blister' : null);
}
