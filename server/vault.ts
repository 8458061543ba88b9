// Seals small secrets under a key derived from the server's secret, so that a stolen database signs no permit. Keeps nothing itself.

import { createCipheriv, createDecipheriv, hkdfSync, randomBytes } from 'node:crypto';
import type { Vault } from '@/server/action';

// AES-256-GCM with 96-bit nonces and 128-bit tags (NIST SP 800-38D); the key by HKDF with SHA-256 (RFC 5869).
const keyBytes = 32;
const nonceBytes = 12;
const tagBytes = 16;

export function vaultOf(secret: string): Vault {
  const key = Buffer.from(hkdfSync('sha256', secret, '', 'rampwell vault', keyBytes));
  return {
    seal(bytes) {
      const nonce = randomBytes(nonceBytes);
      const cipher = createCipheriv('aes-256-gcm', key, nonce);
      const sealed = Buffer.concat([cipher.update(bytes), cipher.final()]);
      return Buffer.concat([nonce, cipher.getAuthTag(), sealed]).toString('base64url');
    },
    open(sealed) {
      const all = Buffer.from(sealed, 'base64url');
      const decipher = createDecipheriv('aes-256-gcm', key, all.subarray(0, nonceBytes), { authTagLength: tagBytes });
      decipher.setAuthTag(all.subarray(nonceBytes, nonceBytes + tagBytes));
      return new Uint8Array(Buffer.concat([decipher.update(all.subarray(nonceBytes + tagBytes)), decipher.final()]));
    },
  };
}
