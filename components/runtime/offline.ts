// Keeps the pages themselves on this device, so that they open without a network. It keeps no answer of the server's: the worker that
// the build writes never touches `/api/`.

/** Registers the worker where there is one; a browser without it works as before, with a network. */
export async function keepPages(): Promise<void> {
  if (__DEV__ || typeof navigator === 'undefined' || !('serviceWorker' in navigator)) return;
  try {
    await navigator.serviceWorker.register('/sw.js');
  } catch {
    // Private windows and some settings forbid it: nothing else depends on it.
  }
}
