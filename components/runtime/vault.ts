// Seals what a phone keeps with a key that cannot be exported from it, AES-256-GCM (NIST SP 800-38D). It knows nothing of what it seals.
// Where the platform has a store for secrets the key lies there; in a browser it is a CryptoKey that no script can read out.

import * as SecureStore from 'expo-secure-store';
import { openDB, type DBSchema } from 'idb';

/** `of` is never there: it says what comes out when it is opened. */
export interface Sealed<Content> {
  iv: Uint8Array<ArrayBuffer>;
  bytes: ArrayBuffer;
  of?: Content;
}

export interface Vault {
  /** @param value anything that JSON can say */
  seal<Content>(value: Content): Promise<Sealed<Content>>;
  /** @throws OperationError when a single bit was changed */
  open<Content>(sealed: Sealed<Content>): Promise<Content>;
  sealBytes(bytes: ArrayBuffer): Promise<Sealed<ArrayBuffer>>;
  openBytes(sealed: Sealed<ArrayBuffer>): Promise<ArrayBuffer>;
}

/** A fresh 96-bit nonce each time; 2³² of them under one key are safe (NIST SP 800-38D §8.3), a phone makes thousands. */
const nonceBytes = 12;
const algorithm = { name: 'AES-GCM', length: 256 };
const uses: KeyUsage[] = ['encrypt', 'decrypt'];
const asBase64 = (bytes: Uint8Array) => btoa(String.fromCharCode(...bytes));
const fromBase64 = (text: string) => Uint8Array.from(atob(text), (letter) => letter.charCodeAt(0));

async function platformKey(name: string): Promise<CryptoKey> {
  const kept = await SecureStore.getItemAsync(name);
  const raw = kept === null ? crypto.getRandomValues(new Uint8Array(32)) : fromBase64(kept);
  if (kept === null) await SecureStore.setItemAsync(name, asBase64(raw));
  return crypto.subtle.importKey('raw', raw, algorithm, false, uses);
}

interface Schema extends DBSchema {
  key: { key: string; value: CryptoKey };
}

/** Two pages that come at once keep one key: whoever is second takes the first one's. */
async function browserKey(name: string): Promise<CryptoKey> {
  const base = await openDB<Schema>('rampwell-keys', 1, { upgrade: (fresh) => void fresh.createObjectStore('key') });
  try {
    const found = await base.get('key', name);
    if (found) return found;
    const fresh = await crypto.subtle.generateKey(algorithm, false, uses);
    const { store, done } = base.transaction('key', 'readwrite');
    const kept = await store.get(name);
    if (!kept) await store.put(fresh, name);
    await done;
    return kept ?? fresh;
  } finally {
    base.close();
  }
}

/** @param name of the key on this phone: letters, digits, dots, hyphens */
export async function openVault(name: string): Promise<Vault> {
  const key = (await SecureStore.isAvailableAsync()) ? await platformKey(name) : await browserKey(name);
  const sealBytes = async (bytes: ArrayBuffer) => {
    const iv = crypto.getRandomValues(new Uint8Array(nonceBytes));
    return { iv, bytes: await crypto.subtle.encrypt({ name: algorithm.name, iv }, key, bytes) };
  };
  const openBytes = ({ iv, bytes }: Omit<Sealed<unknown>, 'of'>) =>
    crypto.subtle.decrypt({ name: algorithm.name, iv }, key, bytes);
  return {
    sealBytes,
    openBytes,
    seal: (value) => sealBytes(new TextEncoder().encode(JSON.stringify(value)).buffer),
    open: async (sealed) => JSON.parse(new TextDecoder().decode(await openBytes(sealed))),
  };
}
