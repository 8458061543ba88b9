// What: what every browser has and jsdom has not. Must not: pretend a behaviour of our own or hide a missing guard.
import { webcrypto } from 'node:crypto';
import { TextDecoder, TextEncoder, types } from 'node:util';
import { deserialize, serialize } from 'node:v8';

const gaps = {
  TextEncoder,
  TextDecoder,
  // IndexedDB copies what it stores by this; v8's own copy keeps dates, maps and typed arrays as browsers do. It knows no CryptoKey: a
  // browser's copy of one is the same key, which still cannot be read out.
  structuredClone: <T>(value: T): T => (types.isCryptoKey(value) ? value : deserialize(serialize(value))),
};
for (const [name, value] of Object.entries(gaps)) {
  if (!(name in globalThis)) Object.defineProperty(globalThis, name, { value, configurable: true, writable: true });
}

// jsdom knows random numbers only; the simulated stimulator checks signatures.
if (!globalThis.crypto?.subtle) Object.defineProperty(globalThis, 'crypto', { value: webcrypto, configurable: true });

// jsdom's blobs can be read only by its FileReader.
if (typeof Blob !== 'undefined' && !Blob.prototype.arrayBuffer) {
  Object.defineProperty(Blob.prototype, 'arrayBuffer', {
    configurable: true,
    writable: true,
    value(this: Blob) {
      return new Promise((resolve, reject) => {
        const reader = new FileReader();
        reader.onload = () => {
          // A buffer of Node's own kind, which its cryptography takes.
          const copy = Buffer.from(new Uint8Array(reader.result instanceof ArrayBuffer ? reader.result : []));
          resolve(copy.buffer.slice(copy.byteOffset, copy.byteOffset + copy.byteLength));
        };
        reader.onerror = () => reject(new Error(reader.error?.message));
        reader.readAsArrayBuffer(this);
      });
    },
  });
}

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
