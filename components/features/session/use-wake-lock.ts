// Keeps the screen awake while a session runs, where the browser can. Without it nothing breaks: the stimulator goes on by itself.

import { useEffect } from 'react';

export function useWakeLock(isWanted: boolean): void {
  useEffect(() => {
    if (!isWanted || typeof navigator === 'undefined' || !('wakeLock' in navigator)) return;
    let lock: WakeLockSentinel | null = null;
    let isGone = false;
    const take = async () => {
      if (document.visibilityState !== 'visible') return;
      try {
        lock = await navigator.wakeLock.request('screen');
        if (isGone) await lock.release();
      } catch {
        // Low battery or the person's own setting: the screen may sleep.
      }
    };
    const onShown = () => void take();
    onShown();
    // The browser takes it away whenever the page is hidden.
    document.addEventListener('visibilitychange', onShown);
    return () => {
      isGone = true;
      document.removeEventListener('visibilitychange', onShown);
      void lock?.release().catch(() => undefined);
    };
  }, [isWanted]);
}
