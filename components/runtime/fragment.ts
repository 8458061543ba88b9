// Reads the token that a mail's link carries behind `#`, where no server log and no referrer sees it.

import { useState } from 'react';

/** The value of `name` in the address's fragment when the page opened, or null. */
export function useFragment(name: string): string | null {
  const [value] = useState(() =>
    typeof window === 'undefined' ? null : new URLSearchParams(window.location.hash.slice(1)).get(name),
  );
  return value;
}
