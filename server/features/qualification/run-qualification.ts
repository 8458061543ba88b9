// A site's own worked cases, asked of the rules that this server decides with. The signed result is given out; what is kept is an entry of
// the site's audit trail, with the hashes of the file and of the result.

import { version } from '@/package.json';
import { action, invalid, notFound, refuse } from '@/server/action';
import { runCases } from '@/server/features/qualification/run-cases';
import { sha256, signResult } from '@/server/features/qualification/sign-result';
import { ensureSigningKey } from '@/server/signing-key';
import { runQualification as contract } from '@/shared/contracts/qualification';
import { qualificationLimits } from '@/shared/rules/house-limits';
import { tally } from '@/shared/rules/qualify';

export const runQualification = action(contract, async ({ actor, body }, tx) => {
  const { siteId, fileName, content } = body;
  if (!actor.siteIds.includes(siteId)) return notFound();
  const { mostCases, mostFailuresShown } = qualificationLimits;
  const ran = await runCases(content);
  if (!ran.ran && ran.why === 'unreadable')
    return invalid([{ path: 'content', code: 'cases_unreadable', facts: { problem: ran.problem } }]);
  if (!ran.ran) return refuse('qualification.too_much', { siteId, facts: { cases: ran.cases, most: mostCases } });
  const { passed, failed } = tally(ran.results);
  const key = await ensureSigningKey(tx);
  const at = await tx.now();
  const file = { name: fileName, sha256: sha256(content) };
  const result = {
    ...{ issuer: 'rampwell' as const, at, version, siteId, byName: actor.name, file, passed, failed },
    cases: ran.results,
  };
  const signed = await signResult(result, key, tx.vault);
  const facts = {
    fileName,
    fileSha256: file.sha256,
    resultSha256: sha256(signed),
    passed,
    failed,
    version,
    kid: key.kid,
  };
  tx.record({ siteId, subject: { kind: 'qualification', id: siteId }, after: facts });
  const failures = ran.results
    .filter(({ pass }) => !pass)
    .slice(0, mostFailuresShown)
    .map(({ id, error }) => ({ id, error: error?.join('; ') ?? null }));
  return { run: { siteId, at, byName: actor.name, ...facts }, failures, signed };
});
