// What: what every browser has and jsdom has not. Must not: pretend a behaviour of our own or hide a missing guard.
import { webcrypto } from 'node:crypto';
import { TextDecoder, TextEncoder } from 'node:util';
import { deserialize, serialize } from 'node:v8';

const gaps = {
  TextEncoder,
  TextDecoder,
  // IndexedDB copies what it stores by this; v8's own copy keeps dates, maps and typed arrays as browsers do.
  structuredClone: <T>(value: T): T => deserialize(serialize(value)),
};
for (const [name, value] of Object.entries(gaps)) {
  if (!(name in globalThis)) Object.defineProperty(globalThis, name, { value, configurable: true, writable: true });
}

// jsdom knows random numbers only; the simulated stimulator checks signatures.
if (!globalThis.crypto?.subtle) Object.defineProperty(globalThis, 'crypto', { value: webcrypto, configurable: true });

// No test depends on the machine's wishes: light, no reduced motion. A test that wants another answer sets its own.
if (typeof window !== 'undefined' && !window.matchMedia) {
  Object.defineProperty(window, 'matchMedia', {
    configurable: true,
    writable: true,
    value: (query: string) => ({
      matches: false,
      media: query,
      onchange: null,
      addEventListener: () => undefined,
      removeEventListener: () => undefined,
      addListener: () => undefined,
      removeListener: () => undefined,
      dispatchEvent: () => false,
    }),
  });
}

// jsdom has the name and throws; nothing is laid out there, so there is nothing to scroll.
if (typeof window !== 'undefined')
  Object.defineProperty(window, 'scrollTo', { configurable: true, value: () => undefined });
