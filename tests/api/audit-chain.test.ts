// Whoever has all rights to the database can do anything to the trail but hide it: one entry changed, removed, moved or put in anywhere is
// found and its place named; a tail that was cut, or a chain written anew, shows against the signed anchors. And nothing goes unrecorded.
import { randomUUID } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { drizzle } from 'drizzle-orm/node-postgres';
import fc from 'fast-check';
import type { Client } from 'pg';
import { z } from 'zod';
import { genesisHash, hashOf, pageOfTrail } from '@/db/queries/audit';
import { anchorAudit } from '@/server/house/anchor-audit';
import { anchorFileName, anchorKeeper, readKeptAnchors } from '@/server/house/keep-anchors';
import { verifyAudit, type AuditFinding } from '@/server/house/verify-audit';
import { knockAt } from '../support/knock';
import { asSuperuser } from '../support/postgres';
import { patience, tried } from '../support/runs';
import { allKnocks, titled, type Knock } from '../support/samples';
import { openWorld, type World } from '../support/world';

let world: World;
let folder: string;

beforeAll(async () => {
  world = await openWorld();
  folder = mkdtempSync(path.join(os.tmpdir(), 'rampwell-anchors-'));
}, 120_000);
afterAll(async () => {
  rmSync(folder, { recursive: true, force: true });
  await world.close();
});

/** Doors that show no record of anybody's and write none. */
const ofNobodysRecord = [
  'account.read-me',
  'account.look-at-invitation',
  'site.list',
  'site.list-staff',
  'protocol.list',
  'permit.read-keys',
  'qualification.read',
];
const holdsNobodysRecord = (name: string) => /^(house|demo)\./.test(name) || ofNobodysRecord.includes(name);

const database = () => world.clinic.client.pool.options.connectionString?.split('/').at(-1) ?? '';

/** With all rights and no triggers, in a transaction that is undone: what the verdict is afterwards. */
async function afterTampering(tamper: (client: Client) => Promise<void>, kept = true): Promise<AuditFinding[]> {
  const file = await readKeptAnchors(path.join(folder, anchorFileName));
  return asSuperuser(async (client) => {
    await client.query(`begin; set local session_replication_role = replica`);
    await tamper(client);
    const { findings } = await verifyAudit(drizzle(client), kept ? (file?.anchors ?? null) : null);
    await client.query('rollback');
    return findings;
  }, database());
}

async function anchorNow(): Promise<void> {
  const { clinic } = world;
  for (const id of await anchorAudit.listDue(clinic.client.db, await clinic.now()))
    await clinic.transact.job(anchorAudit, id);
}

describe('every door', () => {
  async function entriesLeftBy({ contract, sample }: Knock, chains: string): Promise<number> {
    const asked = await sample.ask(world, sample.by);
    const count = async () => {
      const [row] = await world.clinic.rows(
        { n: z.number() },
        'select count(*)::int n from audit_entry where chain like $1 and action = $2',
        [chains, contract.name],
      );
      return row?.n ?? 0;
    };
    const before = await count();
    const browser = await world.as(sample.by);
    const answer = await knockAt(browser, contract, asked, contract.once ? randomUUID() : undefined);
    expect(answer.status).toBe(contract.status ?? 200);
    return (await count()) - before;
  }
  const named = (names: Knock['sample']['names'][]) =>
    titled(
      allKnocks().filter(({ sample, contract }) => names.includes(sample.names) && !holdsNobodysRecord(contract.name)),
    );

  it.each(named(['person']))(
    '%s leaves an entry in the chain of the person whom it concerns',
    async (_name, knock) => expect(await entriesLeftBy(knock, 'participant:%')).toBeGreaterThan(0),
    60_000,
  );

  it.each(named(['site', 'nothing']))(
    '%s leaves an entry in the chain of the person, the site or the house',
    async (_name, knock) => expect(await entriesLeftBy(knock, '%')).toBeGreaterThan(0),
    60_000,
  );
});

describe('the trail of all that', () => {
  it('is whole, and so are its anchors, in the database and beside it', async () => {
    await anchorNow();
    await world.clinic.advance(86_400);
    await anchorNow();
    await anchorKeeper(world.clinic.client.db, folder)();
    const kept = await readKeptAnchors(path.join(folder, anchorFileName));
    const verdict = await verifyAudit(world.clinic.client.db, kept?.anchors);
    expect(verdict).toMatchObject({ anchors: 2, findings: [] });
    expect(verdict.entries).toBeGreaterThan(100);
    expect(verdict.chains).toBeGreaterThan(10);
    expect(kept).toMatchObject({ unreadable: [], anchors: [{ number: 1 }, { number: 2 }] });
    expect(kept?.anchors[1]?.heads.length).toBeLessThan(kept?.anchors[0]?.heads.length ?? 0);
  });

  it('is anchored once a day, and the file gets each anchor once', async () => {
    await anchorNow();
    for (let again = 0; again < 2; again += 1) await anchorKeeper(world.clinic.client.db, folder)();
    expect((await readKeptAnchors(path.join(folder, anchorFileName)))?.anchors).toHaveLength(2);
    const [day] = await world.clinic.rows({ n: z.number() }, 'select count(*)::int n from audit_anchor');
    expect(day?.n).toBe(2);
  });

  const shift = (client: Client, chain: string, from: number, by: 1 | -1) =>
    // Through negative numbers, so that no two stand on one place meanwhile.
    client.query(`
      update audit_entry set sequence = -sequence where chain = '${chain}' and sequence ${by === 1 ? '>=' : '>'} ${from};
      update audit_entry set sequence = -sequence + ${by} where chain = '${chain}' and sequence < 0`);

  const changes = [
    `at = at + interval '1 millisecond'`,
    `actor_name = actor_name || '.'`,
    `actor_role = 'monitor.'`,
    `actor_id = coalesce(actor_id, '') || 'x'`,
    `action = action || '.'`,
    `kind = case kind when 'read' then 'write' else 'read' end`,
    `site_id = case when site_id is null then gen_random_uuid() end`,
    `participant_id = gen_random_uuid()`,
    `subject_kind = coalesce(subject_kind, '') || 'x'`,
    `subject_id = coalesce(subject_id, '') || 'x'`,
    `before = '{"was": "otherwise"}'`,
    `after = '{"is": "otherwise"}'`,
    `why = coalesce(why, '') || 'x'`,
    `request_id = coalesce(request_id, '') || 'x'`,
    `previous_hash = reverse(previous_hash || 'x')`,
    `hash = reverse(hash || 'x')`,
  ];

  it(
    'shows any one entry that was changed, removed, swapped or put in, and names its place',
    async () => {
      const trail: Awaited<ReturnType<typeof pageOfTrail>> = [];
      for (;;) {
        const page = await pageOfTrail(world.clinic.client.db, trail.at(-1) ?? null, 1000);
        trail.push(...page);
        if (page.length === 0) break;
      }
      const lengths = new Map<string, number>();
      for (const { chain, sequence } of trail) lengths.set(chain, sequence);

      /** One wrong against the chain, by somebody who knows how it is made; answers with the place that must be named. */
      async function wrong(client: Client, kind: string, chain: string, at: number, pick: number): Promise<number> {
        const where = `chain = '${chain}' and sequence`;
        const length = lengths.get(chain) ?? 0;
        if (kind === 'change') {
          await client.query(`update audit_entry set ${changes[pick % changes.length]} where ${where} = ${at}`);
          return at;
        }
        if (kind === 'delete' || kind === 'delete and close up') {
          await client.query(`delete from audit_entry where ${where} = ${at}`);
          if (kind !== 'delete') await shift(client, chain, at, -1);
          return at;
        }
        if (kind === 'swap') {
          const other = ((at - 1 + 1 + (pick % Math.max(1, length - 1))) % length) + 1;
          await client.query(`
            update audit_entry set sequence = -1 where ${where} = ${at};
            update audit_entry set sequence = ${at} where ${where} = ${other};
            update audit_entry set sequence = ${other} where ${where} = -1`);
          return Math.min(at, other);
        }
        // Put in, with a hash that fits what is before it; at the end, too.
        const place = pick % 5 === 0 ? length + 1 : at;
        await shift(client, chain, place, 1);
        const model = trail.find((entry) => entry.chain === chain && entry.sequence === at);
        const before = trail.find((entry) => entry.chain === chain && entry.sequence === place - 1);
        if (!model) throw new Error('the chain has this place');
        const previousHash = before?.hash ?? genesisHash;
        const made = { ...model, why: 'never happened' };
        await client.query(
          `insert into audit_entry (chain, sequence, at, actor_id, actor_name, actor_role, action, kind, site_id, participant_id, subject_kind,
             subject_id, before, after, why, request_id, previous_hash, hash)
           values ($1,$2,$3,$4,$5,$6,$7,$8,$9,$10,$11,$12,$13,$14,$15,$16,$17,$18)`,
          [
            ...[chain, place, made.at, made.actorId, made.actorName, made.actorRole, made.action, made.kind],
            ...[made.siteId, made.participantId, made.subjectKind, made.subjectId],
            ...[made.before === null ? null : JSON.stringify(made.before)],
            ...[made.after === null ? null : JSON.stringify(made.after)],
            ...[made.why, made.requestId, previousHash, hashOf(previousHash, made)],
          ],
        );
        return place;
      }

      const kinds = ['change', 'delete', 'delete and close up', 'swap', 'insert'];
      const wrongs = fc.record({
        kind: fc.constantFrom(...kinds),
        entry: fc.nat({ max: trail.length - 1 }),
        pick: fc.nat({ max: 10_000 }),
      });
      await fc.assert(
        fc.asyncProperty(wrongs, async ({ kind, entry, pick }) => {
          const chosen = trail[entry];
          // Two places are needed for a swap.
          if (!chosen || (kind === 'swap' && (lengths.get(chosen.chain) ?? 0) < 2)) return;
          let place = 0;
          const [found] = await afterTampering(async (client) => {
            place = await wrong(client, kind, chosen.chain, chosen.sequence, pick);
          }, false);
          expect({ chain: found?.chain, sequence: found?.sequence }).toEqual({ chain: chosen.chain, sequence: place });
        }),
        tried('S16'),
      );
    },
    patience,
  );

  const ofPerson = () => `participant:${world.record.patient.participantId}`;
  const anchoredAt = async (chain: string) => {
    const [row] = await world.clinic.rows(
      { n: z.number() },
      'select max(sequence)::int n from audit_anchor_head where chain = $1',
      [chain],
    );
    return row?.n ?? 0;
  };

  /** The tail goes, and the head is turned back as if it had never been. */
  const cut = (client: Client, chain: string, from: number) =>
    client.query(`
      delete from audit_entry where chain = '${chain}' and sequence >= ${from};
      update audit_head h set sequence = e.sequence, hash = e.hash, previous_hash = e.previous_hash
        from audit_entry e where h.chain = '${chain}' and e.chain = h.chain and e.sequence = ${from - 1}`);

  it('shows a tail that was cut off with its head turned back, by the anchor', async () => {
    const chain = ofPerson();
    const at = await anchoredAt(chain);
    expect(await afterTampering(async (client) => void (await cut(client, chain, at)))).toContainEqual({
      chain,
      sequence: at,
      what: 'tail_cut',
    });
  });

  it('shows a cut tail by the file alone, when the anchors were removed with it', async () => {
    const chain = ofPerson();
    const at = await anchoredAt(chain);
    const found = await afterTampering(async (client) => {
      await cut(client, chain, at);
      await client.query('delete from audit_anchor_head; delete from audit_anchor');
    });
    expect(found).toContainEqual({ chain, sequence: at, what: 'tail_cut' });
    expect(found).toContainEqual({ chain: 'anchors', sequence: 1, what: 'anchor_removed' });
  });

  it('shows a chain that was written anew from one entry on, hashes, head and all', async () => {
    const chain = ofPerson();
    const at = await anchoredAt(chain);
    const found = await afterTampering(async (client) => {
      const entries = await pageOfTrail(drizzle(client), { chain, sequence: at - 2 }, 1000);
      let [previous] = (
        await client.query<{ hash: string }>('select hash from audit_entry where chain = $1 and sequence = $2', [
          chain,
          at - 2,
        ])
      ).rows.map(({ hash }) => hash);
      for (const entry of entries.filter((each) => each.chain === chain)) {
        const why = entry.sequence === at - 1 ? 'another reason' : entry.why;
        const hash = hashOf(previous ?? '', { ...entry, why });
        await client.query(
          'update audit_entry set why = $3, previous_hash = $4, hash = $5 where chain = $1 and sequence = $2',
          [chain, entry.sequence, why, previous, hash],
        );
        await client.query('update audit_head set previous_hash = $2, hash = $3 where chain = $1', [
          chain,
          previous,
          hash,
        ]);
        previous = hash;
      }
    });
    expect(found).toEqual([{ chain, sequence: at, what: 'rewritten' }]);
  });

  it('shows an anchor that says something else, and a line of the file that nobody signed', async () => {
    expect(
      await afterTampering(
        async (client) =>
          void (await client.query(`update audit_anchor set at = at + interval '1 hour' where number = 1`)),
        false,
      ),
    ).toContainEqual({ chain: 'anchors', sequence: 1, what: 'anchor_altered' });
    const file = path.join(folder, anchorFileName);
    const text = readFileSync(file, 'utf8');
    const other = path.join(folder, 'other.jsonl');
    writeFileSync(
      other,
      text.replace(/"sequence":(\d+)/, (_all, n: string) => `"sequence":${Number(n) + 1}`),
    );
    const kept = await readKeptAnchors(other);
    expect((await verifyAudit(world.clinic.client.db, kept?.anchors)).findings).toContainEqual({
      chain: 'anchors',
      sequence: 1,
      what: 'anchor_signature',
    });
  });
});
