// The keys that sign permits, on a real database: changed while permits are live, withdrawn at once, made once by many.

import { compactVerify, decodeProtectedHeader, importJWK } from 'jose';
import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { readEnv } from '@/server/env';
import { readPermitKeys } from '@/server/features/permit/read-permit-keys';
import { OtherSecret, rotateKeys } from '@/server/house/rotate-keys';
import { makeTransact } from '@/server/transact';
import type { PermitView } from '@/shared/contracts/permit';
import { type Clinic } from '../support/clinic';
import { permitFor, readyPatient, openMorning } from '../support/running';

let clinic: Clinic;
let siteId: string;
let oona: AccountActor;

beforeEach(async () => {
  ({ clinic, siteId, oona } = await openMorning());
});
afterEach(() => clinic.close());

const rotate = (withdraw = false) => rotateKeys(clinic.transact, { withdraw });
const trusted = async () => (await clinic.call(oona, readPermitKeys, {})).keys;
const kidOf = ({ token }: PermitView) => decodeProtectedHeader(token).kid;
/** Whether a stimulator that reads the keys now can check the permit. */
async function isTrusted({ token }: PermitView): Promise<boolean> {
  const key = (await trusted()).find(({ kid }) => kid === decodeProtectedHeader(token).kid);
  if (!key) return false;
  await compactVerify(token, await importJWK(key, 'EdDSA'));
  return true;
}

it('signs with the new key, and trusts the old one until the permits under it are over', async () => {
  const before = await permitFor(clinic, await readyPatient(clinic, oona, siteId));
  const { kid, withdrawn } = await rotate();
  expect(withdrawn).toEqual([]);
  const after = await permitFor(clinic, await readyPatient(clinic, oona, siteId));
  expect([kidOf(before) === kid, kidOf(after)]).toEqual([false, kid]);
  expect([await isTrusted(before), await isTrusted(after)]).toEqual([true, true]);
  await clinic.advance(30 * 60);
  expect((await trusted()).map((key) => key.kid)).toEqual([kid]);
});

it('trusts a withdrawn key no longer, at once, and goes on signing with the new one', async () => {
  const before = await permitFor(clinic, await readyPatient(clinic, oona, siteId));
  const { kid, withdrawn } = await rotate(true);
  expect(withdrawn).toEqual([kidOf(before)]);
  expect(await isTrusted(before)).toBe(false);
  expect(kidOf(await permitFor(clinic, await readyPatient(clinic, oona, siteId)))).toBe(kid);
});

it('keeps every key on record, the private part sealed, and the change in the audit trail', async () => {
  await trusted();
  const { kid } = await rotate(true);
  const rows = await clinic.rows(
    { kid: z.string(), sealed_private: z.string(), closed_why: z.string().nullable() },
    'select kid, sealed_private, closed_why from signing_key order by created_at',
  );
  expect(rows.map(({ closed_why: why }) => why)).toEqual(['withdrawn', null]);
  expect(new Set(rows.map((row) => row.sealed_private)).size).toBe(2);
  const entries = await clinic.rows(
    { subject_id: z.string(), actor_role: z.string() },
    `select subject_id, actor_role from audit_entry where action = 'keys.rotate'`,
  );
  expect(entries).toEqual([{ subject_id: kid, actor_role: 'system' }]);
});

it('makes no key under another secret than the one in use was sealed with', async () => {
  await trusted();
  const url = clinic.client.pool.options.connectionString ?? '';
  const env = readEnv({ DATABASE_URL: url, DEMO: '1', SECRET: 'another secret than the server has, long enough' });
  await expect(rotateKeys(makeTransact(clinic.client, env), { withdraw: true })).rejects.toThrow(OtherSecret);
  expect(await clinic.rows({ kid: z.string() }, 'select kid from signing_key where closed_at is null')).toHaveLength(1);
});

it('makes one key when many ask at once for the first', async () => {
  const asked = await Promise.all(Array.from({ length: 4 }, trusted));
  expect(new Set(asked.flat().map(({ kid }) => kid)).size).toBe(1);
});
