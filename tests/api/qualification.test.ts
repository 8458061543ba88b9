// A site's worked cases through the server: run, counted, signed, kept in the trail; what is no such file is refused and leaves nothing.

import { createHash } from 'node:crypto';
import { compactVerify, importJWK } from 'jose';
import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { readPermitKeys } from '@/server/features/permit/read-permit-keys';
import { readQualification } from '@/server/features/qualification/read-qualification';
import { runQualification } from '@/server/features/qualification/run-qualification';
import { version } from '@/package.json';
import { qualificationLimits } from '@/shared/rules/house-limits';
import dose from '@/tests/published/dose.json';
import rules from '@/tests/published/rules.json';
import { checkPermit } from '@/components/runtime/device/check-permit';
import { openClinic, type Clinic } from '../support/clinic';

let clinic: Clinic;
let siteId: string;
let ada: AccountActor;
let oona: AccountActor;

beforeAll(async () => {
  clinic = await openClinic();
  siteId = await clinic.site('LS');
  ada = await clinic.staff('Ada Hale', 'administrator', siteId);
  oona = await clinic.staff('Oona Feld', 'clinician', siteId);
});
afterAll(() => clinic.close());

const half = { id: 'half', kind: 'fraction', input: { prescribed_C: 2, delivered_C: 1 }, expected: { fraction: 0.5 } };
const wrong = { ...half, id: 'wrong', expected: { fraction: 0.6 } };
const odd = { ...half, id: 'odd', kind: 'horoscope' };
const run = (content: unknown, fileName = 'own.json') =>
  clinic.call(ada, runQualification, { body: { siteId, fileName, content: textOf(content) } });
const textOf = (content: unknown) => (typeof content === 'string' ? content : JSON.stringify(content));
const Signed = z.object({
  result: z.object({
    passed: z.number(),
    failed: z.number(),
    cases: z.array(z.object({ id: z.string(), pass: z.boolean(), expected: z.unknown(), actual: z.unknown() })),
    file: z.object({ name: z.string(), sha256: z.string() }),
    version: z.string(),
  }),
  jws: z.string(),
  key: z.object({ kty: z.literal('OKP'), crv: z.literal('Ed25519'), x: z.string(), kid: z.string() }),
});
const entries = () =>
  clinic.rows(
    { kind: z.string() },
    `select kind from audit_entry where action = 'qualification.run' order by sequence`,
  );

it('runs the published cases and says that all passed', async () => {
  const { run: kept, failures } = await run(rules, 'rules.json');
  expect([kept.passed, kept.failed, failures]).toEqual([rules.cases.length, 0, []]);
  expect((await run(dose)).run.passed).toBe(dose.cases.length);
});

it('names what did not pass and why, and keeps the run for all staff of the site to see', async () => {
  const { run: kept, failures } = await run({ cases: [half, wrong, odd] }, 'mixed.json');
  expect(failures).toEqual([
    { id: 'wrong', error: null },
    { id: 'odd', error: expect.stringContaining('horoscope') },
  ]);
  expect(kept).toMatchObject({ passed: 1, failed: 2, fileName: 'mixed.json', byName: 'Ada Hale', version });
  expect(await clinic.call(oona, readQualification, {})).toEqual({ runs: [kept] });
});

it('shows the last run of each own site and no other’s', async () => {
  const elsewhere = await clinic.site('MR');
  const far = await clinic.staff('Ada Far', 'administrator', elsewhere);
  expect(await clinic.call(far, readQualification, {})).toEqual({ runs: [] });
  await run({ cases: [half] }, 'last.json');
  expect((await clinic.call(ada, readQualification, {})).runs.map(({ fileName }) => fileName)).toEqual(['last.json']);
  const body = { siteId, fileName: 'own.json', content: textOf({ cases: [half] }) };
  expect(await clinic.refused(far, runQualification, { body })).toMatchObject({ status: 404 });
});

it('signs every case, the file’s hash and the version by a key of the house, and that signature is no permit', async () => {
  const content = textOf({ cases: [half, wrong] });
  const { run: kept, signed } = await run(content, 'signed.json');
  const { result, jws, key } = Signed.parse(JSON.parse(signed));
  const { payload, protectedHeader } = await compactVerify(jws, await importJWK(key, 'EdDSA'));
  expect(JSON.parse(new TextDecoder().decode(payload))).toEqual(JSON.parse(signed).result);
  expect(protectedHeader).toMatchObject({ kid: kept.kid, typ: 'rampwell-qualification+json' });
  expect((await clinic.call(ada, readPermitKeys, {})).keys.map(({ kid }) => kid)).toContain(key.kid);
  const hash = (text: string) => createHash('sha256').update(text).digest('hex');
  expect(result.file).toEqual({ name: 'signed.json', sha256: hash(content) });
  expect([kept.fileSha256, kept.resultSha256, result.version]).toEqual([hash(content), hash(signed), version]);
  expect(result.cases.map(({ id, pass }) => [id, pass])).toEqual([
    ['half', true],
    ['wrong', false],
  ]);
  const keys = [{ ...key, alg: 'EdDSA' as const, use: 'sig' as const }];
  const asPermit = await checkPermit({ token: jws, keys, deviceId: siteId, nowMs: 0, highestCounter: 0 });
  expect(asPermit.ok).toBe(false);
});

it.each([
  ['no JSON', '{"cases": ['],
  ['a list', []],
  ['no cases', { cases: [] }],
  ['a field that is not known', { cases: [half], colour: 'red' }],
])('refuses %s by the field and with what is wrong, and keeps no run', async (_what, content) => {
  const before = await clinic.call(ada, readQualification, {});
  const body = { siteId, fileName: 'own.json', content: textOf(content) };
  expect(await clinic.refused(ada, runQualification, { body })).toMatchObject({
    ...{ status: 422, code: 'invalid' },
    fields: [{ path: 'content', code: 'cases_unreadable', facts: { problem: expect.any(String) } }],
  });
  expect(await clinic.call(ada, readQualification, {})).toEqual(before);
  expect((await entries()).at(-1)).toEqual({ kind: 'refusal' });
});

it('refuses more cases than are run at once, and says how many may be', async () => {
  const most = qualificationLimits.mostCases;
  const content = textOf({ cases: Array.from({ length: most + 1 }, () => half) });
  const body = { siteId, fileName: 'own.json', content };
  expect(await clinic.refused(ada, runQualification, { body })).toMatchObject({
    ...{ status: 409, code: 'qualification.too_much', facts: { cases: most + 1, most } },
  });
});

it('gives others their turn while many cases run', async () => {
  let turns = 0;
  let isOver = false;
  const turn = () => {
    turns += 1;
    if (!isOver) setImmediate(turn);
  };
  setImmediate(turn);
  const { runCases } = await import('@/server/features/qualification/run-cases');
  await runCases(textOf({ cases: Array.from({ length: 400 }, () => half) }));
  isOver = true;
  expect(turns).toBeGreaterThanOrEqual(400 / qualificationLimits.casesAtOnce - 1);
});
