// The session of the person signed in, for screens. One run a page; screens come and go without touching it.

import { useEffect, useSyncExternalStore } from 'react';
import { keepMe } from './kept-me';
import { useMe } from './me';
import { sessionRunOf, type RunView, type SessionRun } from './session-run';

const none: RunView = { phase: 'unknown', run: null, device: null, speed: 1 };
const readNone = () => none;
const leaveNone = () => () => undefined;

export function useSessionRun(): { view: RunView; session: SessionRun | null } {
  const me = useMe();
  const session = me?.account.role === 'participant' ? sessionRunOf(me.account.id) : null;
  useEffect(() => void session?.open(), [session]);
  const view = useSyncExternalStore(session?.subscribe ?? leaveNone, session?.read ?? readNone, readNone);
  const isRunning = view.phase === 'running';
  useEffect(() => {
    if (isRunning && me) void keepMe(me);
  }, [isRunning, me]);
  return { view, session };
}
