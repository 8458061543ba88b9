// What: a run on the bench for a page in jsdom: everything real but the check of the signature, which another test proves.
// Must not: wait for real time.
import { senderOf } from '@/components/runtime/unsent-sender';
import { claimsOf } from './permits';
import { freshAccount, readyBench } from './bench';
import { runBenchOf, type RunBench } from './run';

const unsigned = {
  key: { kty: 'OKP', crv: 'Ed25519', x: 'x', kid: 'page', alg: 'EdDSA', use: 'sig' },
  sign: async () => 'token',
} as const;

export async function runOnPage(): Promise<RunBench> {
  const accountId = freshAccount();
  const bench = await readyBench(unsigned, accountId, { checkPermit: async () => ({ ok: true, claims: claimsOf() }) });
  return runBenchOf(accountId, bench, senderOf(accountId));
}
export const pageSigner = unsigned;
