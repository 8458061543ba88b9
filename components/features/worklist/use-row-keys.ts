// The panel's keys: j and k move, Enter opens, / searches, ? shows them all. Off while somebody types, and can be switched off (WCAG 2.1.4).

import { useEffect, useState } from 'react';

export interface RowKeys {
  count: number;
  onOpen(index: number): void;
  onClaim?(index: number): void;
  onSearch(): void;
  onHelp(): void;
}

function isTyping(target: EventTarget | null): boolean {
  return target instanceof HTMLElement && (target.isContentEditable || ['INPUT', 'TEXTAREA', 'SELECT', 'BUTTON', 'A'].includes(target.tagName));
}

/** Index of the row that the keys stand on; -1 before the first key. */
export function useRowKeys({ count, onOpen, onClaim, onSearch, onHelp }: RowKeys): number {
  const [active, setActive] = useState(-1);
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey) return;
      const typing = isTyping(event.target);
      if (typing && event.key !== 'Escape') return;
      const act: Readonly<Record<string, () => void>> = {
        j: () => setActive((at) => Math.min(count - 1, at + 1)),
        k: () => setActive((at) => Math.max(0, at - 1)),
        Enter: () => active >= 0 && onOpen(active),
        a: () => active >= 0 && onClaim?.(active),
        '/': onSearch,
        '?': onHelp,
      };
      const run = act[event.key];
      if (!run) return;
      event.preventDefault();
      run();
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  }, [active, count, onOpen, onClaim, onSearch, onHelp]);
  return active < count ? active : -1;
}
