// What: `npm run audit:verify`. Walks every chain of the audit trail, compares the heads and the signed anchors (in the database, and in the
// file beside the data or the one given: `npm run audit:verify -- /media/elsewhere/audit-anchors.jsonl`). Works on DATABASE_URL or on this
// checkout's own database. Ends with 1 when anything is wrong. Must not: change anything.
import path from 'node:path';
import { installPackages } from './ground/install.mjs';
import { borrow } from './ground/borrow.mjs';
import { reachDatabase } from './ground/database.mjs';
import { workFolder } from './ground/paths.mjs';
import { end, main, Plainly } from './ground/processes.mjs';

const say = console.log;

/** What a finding means, for people. */
const meanings = {
  altered: 'altered: the entry says something else than its hash was made for',
  removed: 'removed: an entry that stood here is gone',
  reordered: 'reordered: an entry stands here that was written elsewhere',
  inserted: 'inserted: an entry stands here that the next one, or the head, does not know',
  head_altered: 'head altered: it does not carry the hash of the last entry',
  tail_cut: 'tail cut: a signed anchor names this entry, and it is gone',
  rewritten: 'rewritten: the chain is whole, but not the one that was anchored',
  anchor_altered: 'anchor altered: it says something else than was signed',
  anchor_removed: 'anchor removed',
  anchor_signature: 'anchor without a valid signature of this house',
};

await main(async () => {
  await installPackages(say);
  const databaseUrl = await reachDatabase(say);
  const house = await borrow('db/client', 'server/house/keep-anchors', 'server/house/verify-audit');
  const given = process.argv[2];
  const file = given ?? path.join(process.env.RAMPWELL_DATA || workFolder, house.anchorFileName);
  const kept = await house.readKeptAnchors(file);
  if (given && !kept) throw new Plainly(`There is no file ${given}.`);
  const client = house.connect(databaseUrl, 2, (error) => say(error.message));
  try {
    const { entries, chains, anchors, findings } = await house.verifyAudit(client.db, kept?.anchors ?? null);
    for (const line of kept?.unreadable ?? []) say(`${file} line ${line}: cannot be read`);
    for (const { chain, sequence, what } of findings) say(`${chain} ${sequence}: ${meanings[what]}`);
    const beside = kept ? `, ${kept.anchors.length} in ${file}` : '; no file of anchors outside the database';
    const wrong = findings.length + (kept?.unreadable.length ?? 0);
    say(
      `${entries} entries in ${chains} chains, ${anchors} anchors${beside}: ${wrong === 0 ? 'all in order' : `${wrong} wrong`}`,
    );
    await client.close();
    return await end(wrong === 0 ? 0 : 1);
  } catch (error) {
    await client.close().catch(() => undefined);
    throw error;
  }
});
