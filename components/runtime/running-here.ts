// Whether this browser holds a session that is not over. Kept by the runner; read by the pages that must not lead away from it.

import { useSyncExternalStore } from 'react';

let running = false;
const listeners = new Set<() => void>();

/** Said by the session's runner when a session begins here, is found again, or ends. */
export function setRunningHere(isRunning: boolean): void {
  if (running === isRunning) return;
  running = isRunning;
  for (const listener of listeners) listener();
}

/** True while a session runs on this phone. */
export function useRunningHere(): boolean {
  return useSyncExternalStore(
    (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    () => running,
    () => false,
  );
}
