// Sees to it that one page at a time drives the stimulator of an account: a second one would write over the first. The newest page
// that asks for it gets it; a page that only looks leaves it where it is. Browsers without locks have one page as far as we know.

export type Claim = 'take' | 'if_free';

/**
 * @param onLost called once when another page has taken over
 * @returns whether this page has it now
 */
export function claimStimulator(accountId: string, claim: Claim, onLost: () => void): Promise<boolean> {
  if (typeof navigator === 'undefined' || !('locks' in navigator)) return Promise.resolve(true);
  const name = `rampwell-stimulator-${accountId}`;
  return new Promise((resolve) => {
    let isHeld = false;
    const options: LockOptions = claim === 'take' ? { steal: true } : { ifAvailable: true };
    const hold = (lock: Lock | null) => {
      isHeld = lock !== null;
      resolve(isHeld);
      // Held until the page goes, or another one takes it.
      return lock === null ? undefined : new Promise<void>(() => undefined);
    };
    navigator.locks.request(name, options, hold).catch(() => {
      if (isHeld) onLost();
      else resolve(false);
    });
  });
}
