// What Today shows: the server's clearance and course, and whether this phone holds a running session.

import type { Href } from 'expo-router';
import { useEffect } from 'react';
import { useTranslation } from 'react-i18next';
import { useRead } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { reportUnused } from '@/components/runtime/report-unused';
import { useRunningHere } from '@/components/runtime/running-here';
import { useUnsent } from '@/components/runtime/unsent';
import { readClearance, type ClearanceView } from '@/shared/contracts/clearance';
import { readCourse, type CourseView } from '@/shared/contracts/course';
import { whenOf } from './pictures/RefusalList';
import { todayState, type TodayState } from './today-state';

export interface TodayStep {
  kind: TodayState;
  isHeld: boolean;
  main: { word: string; href: Href } | null;
  second: { word: string; href: Href } | null;
}

export type Today =
  | { state: 'loading' }
  | { state: 'failed'; retry(): void }
  | { state: 'ready'; clearance: ClearanceView; course: CourseView | null; sentence: string; day: string; step: TodayStep; unsent: number };

// Own choice: often enough that "too early" turns into "may start" while the page is open.
const everyMs = 20_000;

function callOf(answer: ClearanceView): Href {
  return `tel:${answer.site.phone.replace(/[^+0-9]/g, '')}`;
}

function stepOf(kind: TodayState, answer: ClearanceView): TodayStep {
  const call = { word: 'call', href: callOf(answer) };
  const message = { word: 'message', href: '/messages' };
  const step = (main: TodayStep['main'], second: TodayStep['second'] = null): TodayStep => ({ kind, isHeld: kind === 'hold', main, second });
  switch (kind) {
    case 'running':
      return step({ word: 'running', href: '/run' });
    case 'waiting':
      return step({ word: 'waiting', href: '/set-up' });
    case 'acknowledge':
    case 'acknowledgeFirst':
      return step({ word: 'acknowledge', href: '/acknowledge' });
    case 'diary':
      return step({ word: 'diary', href: `/diary/${answer.diaryDueSessionId}` });
    case 'nextDay':
      return step({ word: 'nextDay', href: `/diary/${answer.nextDayDueSessionId}?kind=next_day` });
    case 'start':
      return step({ word: 'start', href: '/set-up' });
    case 'check':
      return step({ word: 'check', href: '/precheck' });
    case 'hold':
    case 'notReady':
      return step(call, message);
    case 'early':
    case 'record':
    case 'finished':
    case 'withdrawn':
      return step(null, message);
  }
}

/** A permit that ended before its session began: the stimulator's word is fetched and told, once a session. */
function useUnusedPermit(accountId: string | undefined, answer: ClearanceView | undefined, again: () => unknown): void {
  const sessionId = answer && !answer.livePermitId ? answer.openSessionId : null;
  useEffect(() => {
    if (!accountId || !sessionId) return;
    // Not told is not lost: the next look at Today tries again.
    void reportUnused(accountId, sessionId).then((isTold) => (isTold ? again() : undefined), () => undefined);
  }, [accountId, sessionId, again]);
}

export function useToday(): Today {
  const { t } = useTranslation('clearance');
  const me = useMe();
  const clearance = useRead(readClearance, { query: {}, everyMs });
  const courseId = clearance.data?.courseId ?? undefined;
  const course = useRead(readCourse, { params: { courseId: courseId ?? '' }, enabled: courseId !== undefined });
  const format = useFormat(clearance.data?.zone);
  const isRunningHere = useRunningHere();
  const { count } = useUnsent();
  const answer = clearance.data;
  useUnusedPermit(me?.account.id, answer, clearance.refetch);
  // A failed read must not leave "you can start" on the page: an unknown is not a yes.
  if (clearance.isError) return { state: 'failed', retry: () => void clearance.refetch() };
  if (!answer || !me || (courseId !== undefined && course.isPending)) return { state: 'loading' };
  const kind = todayState(answer, { personState: me.participant?.state ?? '', isRunningHere });
  const earliest = answer.earliestStartAt ?? answer.nextSession?.windowFrom;
  const sentence = kind === 'early' && !earliest ? t('today.state.notReady') : t(`today.state.${kind}`, { when: earliest ? whenOf(earliest, answer.asOf, format, t) : '' });
  return { state: 'ready', clearance: answer, course: course.data ?? null, sentence, day: format.day(answer.asOf), step: stepOf(kind, answer), unsent: count };
}
