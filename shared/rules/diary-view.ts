// Stored diary pages as they are told, after and next day apart. What their answers lead to is lockout.ts.

import {
  diaryAnswersSchema,
  nextDayAnswersSchema,
  type DiaryAnswers,
  type NextDayAnswers,
} from '@/shared/values/diary-answers';

export type StoredPage = {
  readonly id: string;
  readonly sessionId: string;
  readonly kind: 'after' | 'next_day';
  readonly answers: unknown;
  readonly emergencyAdvice: boolean;
  readonly writtenAt: string;
};
type Photo = {
  readonly id: string;
  readonly sessionId: string;
  readonly takenAt: string;
  readonly width: number;
  readonly height: number;
};
type Locked = { readonly sourceId: string | null; readonly level: string; readonly code: string };

export type PageView = {
  id: string;
  sessionId: string;
  kind: 'after' | 'next_day';
  writtenAt: string;
  after: DiaryAnswers | null;
  nextDay: NextDayAnswers | null;
  photos: { id: string; takenAt: string; width: number; height: number }[];
  lockouts: { code: string; level: string }[];
  emergencyAdvice: boolean;
};

/** Pseudonymous readers see neither a person's own words nor photos. */
export type Reader = 'whole' | 'pseudonymous';

function withoutWords<T extends { freeText?: string | undefined }>(answers: T, reader: Reader): T {
  return reader === 'whole' ? answers : { ...answers, freeText: undefined };
}

/** Photos belong to the session and are told with its diary. */
export function pageView(
  page: StoredPage,
  photos: readonly Photo[],
  locked: readonly Locked[],
  reader: Reader,
): PageView {
  const isAfter = page.kind === 'after';
  return {
    id: page.id,
    sessionId: page.sessionId,
    kind: page.kind,
    writtenAt: page.writtenAt,
    after: isAfter ? withoutWords(diaryAnswersSchema.parse(page.answers), reader) : null,
    nextDay: isAfter ? null : withoutWords(nextDayAnswersSchema.parse(page.answers), reader),
    photos:
      isAfter && reader === 'whole'
        ? photos
            .filter(({ sessionId }) => sessionId === page.sessionId)
            .map(({ id, takenAt, width, height }) => ({ id, takenAt, width, height }))
        : [],
    lockouts: locked.filter(({ sourceId }) => sourceId === page.id).map(({ code, level }) => ({ code, level })),
    emergencyAdvice: page.emergencyAdvice,
  };
}

/** Both pages of one session. */
export function pagesOf(
  sessionId: string,
  pages: readonly StoredPage[],
  photos: readonly Photo[],
  locked: readonly Locked[],
  reader: Reader,
): { diary: PageView | null; nextDay: PageView | null } {
  const own = pages
    .filter((page) => page.sessionId === sessionId)
    .map((page) => pageView(page, photos, locked, reader));
  return {
    diary: own.find(({ kind }) => kind === 'after') ?? null,
    nextDay: own.find(({ kind }) => kind === 'next_day') ?? null,
  };
}
