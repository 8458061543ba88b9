// What holds for every action: a key is honoured once, a refusal leaves nothing but its entry, chains of the trail are whole.
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { hashOf, genesisHash, listChain } from '@/db/queries/audit';
import { action, refuse } from '@/server/action';
import { contract } from '@/shared/contracts/contract';
import { openClinic, type Clinic, type Patient } from '../support/clinic';
import { asSuperuser } from '../support/postgres';

let clinic: Clinic;
let siteId: string;
let person: Patient;
let other: Patient;

beforeAll(async () => {
  clinic = await openClinic();
  siteId = await clinic.site('LS');
  person = await clinic.patient('Ines Marlow', siteId);
  other = await clinic.patient('Halden Brisk', siteId);
});
afterAll(() => clinic.close());

/** A small door that writes one message, or refuses after having written it. */
const write = contract({
  name: 'test.write',
  method: 'POST',
  path: '/api/test',
  who: ['participant'],
  reach: 'own',
  once: true,
  body: z.strictObject({ text: z.string(), isRefused: z.boolean().default(false), password: z.string().optional() }),
  answer: z.strictObject({ id: z.string() }),
  about: 'For tests.',
});
const writes = action(write, async ({ actor, body }, tx) => {
  const id = randomUUID();
  await tx.db.execute(
    `insert into message (id, participant_id, account_id, from_site, text, created_at)
     values ('${id}', '${actor.participantId}', '${actor.accountId}', false, '${body.text}', now())`,
  );
  tx.record({
    participantId: actor.participantId ?? undefined,
    subject: { kind: 'message', id },
    after: { text: body.text },
  });
  tx.tell({ kind: 'message_waiting', toEmail: 'a@b.example', language: 'en', facts: {}, key: `told:${body.text}` });
  return body.isRefused ? refuse('test.refused') : { id };
});

const countOf = async (text: string) =>
  (await clinic.rows({ n: z.number() }, 'select count(*)::int as n from message where text = $1', [text]))[0]?.n;

describe('a key', () => {
  it('gives the same answer again and writes once', async () => {
    const given = { body: { text: 'once' }, key: 'k1' };
    const first = await clinic.call(person, writes, given);
    expect(await clinic.call(person, writes, given)).toEqual(first);
    expect(await countOf('once')).toBe(1);
  });

  it('writes once when twenty requests with it come at the same moment', async () => {
    const given = { body: { text: 'race' }, key: 'k2' };
    const answers = await Promise.all(Array.from({ length: 20 }, () => clinic.call(person, writes, given)));
    expect(new Set(answers.map(({ id }) => id)).size).toBe(1);
    expect(await countOf('race')).toBe(1);
  });

  it('is refused for another wish, and is another person’s own', async () => {
    const given = { body: { text: 'first wish' }, key: 'k3' };
    const { id } = await clinic.call(person, writes, given);
    const refusal = await clinic.refused(person, writes, { body: { text: 'second wish' }, key: 'k3' });
    expect([refusal.status, refusal.code]).toEqual([409, 'idempotency.other_body']);
    expect(await countOf('second wish')).toBe(0);
    expect((await clinic.call(other, writes, given)).id).not.toBe(id);
  });

  it('of a wish that was refused is free: what was refused may be allowed later', async () => {
    await clinic.refused(person, writes, { body: { text: 'later', isRefused: true }, key: 'k4' });
    await clinic.call(person, writes, { body: { text: 'later' }, key: 'k4' });
    expect(await countOf('later')).toBe(1);
  });

  it('keeps nothing of a password that came with the wish', async () => {
    await clinic.call(person, writes, { body: { text: 'signed', password: 'one' }, key: 'k5' });
    await clinic.call(person, writes, { body: { text: 'signed', password: 'two' }, key: 'k5' });
    expect(await countOf('signed')).toBe(1);
  });
});

describe('a refusal', () => {
  it('leaves nothing behind but its entry in the trail, even where the action had written', async () => {
    await clinic.refused(person, writes, { body: { text: 'undone', isRefused: true } });
    expect(await countOf('undone')).toBe(0);
    expect(await clinic.rows({ key: z.string() }, `select key from outbox where key = 'told:undone'`)).toEqual([]);
    const entries = await clinic.rows(
      { kind: z.string(), code: z.string(), chain: z.string() },
      `select kind, after->>'code' as code, chain from audit_entry where action = 'test.write' and kind = 'refusal' order by sequence desc limit 1`,
    );
    expect(entries).toEqual([{ kind: 'refusal', code: 'test.refused', chain: `participant:${person.participantId}` }]);
  });
});

describe('the trail', () => {
  const read = (chain: string) => listChain(clinic.client.db, chain, 0, 1000);
  /** The first entry whose hash is not that of what it says; 0 when the chain is whole. */
  const brokenAt = async (chain: string) => {
    let previous = genesisHash;
    for (const row of await read(chain)) {
      if (row.previousHash !== previous || hashOf(previous, row) !== row.hash) return row.sequence;
      previous = row.hash;
    }
    return 0;
  };

  it('is one whole chain a person, without gap or fork, when forty writes race', async () => {
    await Promise.all(
      Array.from({ length: 40 }, (_, index) =>
        clinic.call(index % 2 ? person : other, writes, { body: { text: `entry ${index}` } }),
      ),
    );
    const chain = `participant:${person.participantId}`;
    const rows = await read(chain);
    expect(rows.map(({ sequence }) => sequence)).toEqual(rows.map((_, index) => index + 1));
    expect(await brokenAt(chain)).toBe(0);
    expect(await brokenAt(`participant:${other.participantId}`)).toBe(0);
  });

  it('shows where somebody with all rights changed an entry', async () => {
    const chain = `participant:${other.participantId}`;
    await asSuperuser(async (client) => {
      await client.query(`alter table audit_entry disable trigger append_only`);
      await client.query(
        `update audit_entry set after = '{"text":"nothing happened"}' where chain = $1 and sequence = 3`,
        [chain],
      );
      await client.query(`alter table audit_entry enable trigger append_only`);
    }, clinic.client.pool.options.connectionString?.split('/').at(-1));
    expect(await brokenAt(chain)).toBe(3);
  });

  it('is written in the same transaction: an action that fails leaves no entry', async () => {
    const fails = action(write, async (_input, tx) => {
      tx.record({ siteId, subject: { kind: 'never', id: 'x' } });
      throw new Error('on purpose');
    });
    await expect(clinic.call(person, fails, { body: { text: 'x' } })).rejects.toThrow('on purpose');
    expect(
      await clinic.rows({ kind: z.string() }, `select kind from audit_entry where subject_kind = 'never'`),
    ).toEqual([]);
  });

  it('keeps the order of keys out of its hashes', () => {
    const entry = {
      chain: 'house',
      at: 'x',
      actorId: null,
      actorName: 'x',
      actorRole: 'x',
      action: 'x',
      kind: 'write' as const,
    };
    const rest = {
      siteId: null,
      participantId: null,
      subjectKind: null,
      subjectId: null,
      before: null,
      why: null,
      requestId: null,
    };
    const one = hashOf(genesisHash, { ...entry, ...rest, after: { a: 1, b: { c: 2, d: undefined } } });
    expect(hashOf(genesisHash, { ...entry, ...rest, after: { b: { c: 2 }, a: 1 } })).toBe(one);
  });
});
