// Whose rows a connection may touch, held by the database alone: the access matrix with the server deceived about who is asking, and plain
// SQL across sites. Without a scope there is nothing to see.
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { connect, type Client, type Scope } from '@/db/client';
import { migrate } from '@/db/migrate';
import type { AccountActor } from '@/server/action';
import { api } from '@/server/api';
import { readEnv } from '@/server/env';
import { makeTransact, type AnyAction } from '@/server/transact';
import { secretOfTests } from '../support/clinic';
import { knockAt } from '../support/knock';
import { asSuperuser } from '../support/postgres';
import { allKnocks, nameOf, titled, type Knock } from '../support/samples';
import { fingerprints } from '../support/tables';
import { openWorld, standingOf, type Who, type World } from '../support/world';

let world: World;
/** The server takes each of these for somebody of the same role who reaches the record. The database knows better. */
const takenFor = {
  'participant, other site': 'participant, self',
  'participant, same site': 'participant, self',
  'caregiver, not linked': 'caregiver, diary shared',
  'caregiver, removed': 'caregiver, diary shared',
  'coordinator, other site': 'coordinator, own site',
  'clinician, other site': 'clinician, own site',
  'monitor, other site': 'monitor, own site',
  'administrator, other site': 'administrator, own site',
} as const satisfies Partial<Record<Who, Who>>;
type Stranger = keyof typeof takenFor;
const strangers = Object.keys(takenFor) as Stranger[];

const mistake = (actor: AccountActor): AccountActor => {
  const stranger = strangers.find((who) => world.people[who].accountId === actor.accountId);
  return stranger ? world.people[takenFor[stranger]] : actor;
};

let app: Client;

beforeAll(async () => {
  world = await openWorld({ mistake });
  app = connect(url(), 4, () => undefined);
}, 120_000);
afterAll(async () => {
  await app.close();
  await world.close();
});

const url = () => world.clinic.client.pool.options.connectionString ?? '';

/** Tables of the house itself: nobody's rows are in them, and the app's role has of them only what every action needs. */
const ofTheHouse = {
  signing_key: 'INSERT,SELECT',
  demo_clock: 'SELECT',
  ...{ demo_mail: '', demo_progress: '', heartbeat: '', rate_limit: '', audit_anchor: '', audit_anchor_head: '' },
};

const guarded = async (): Promise<string[]> => {
  const rows = await world.clinic.rows(
    { name: z.string() },
    `select relname::text as name from pg_class where relnamespace = 'public'::regnamespace and relkind = 'r'
     and relrowsecurity and relforcerowsecurity order by 1`,
  );
  return rows.map(({ name }) => name);
};

describe('every table', () => {
  it('is bound by row security, its owner too, but for those of the house itself', async () => {
    const all = await world.clinic.rows(
      { name: z.string() },
      `select relname::text as name from pg_class where relnamespace = 'public'::regnamespace and relkind = 'r' order by 1`,
    );
    const names = all.map(({ name }) => name);
    expect([...(await guarded()), ...Object.keys(ofTheHouse)].sort()).toEqual(names);
    expect((await guarded()).length).toBeGreaterThan(35);
  });

  it('belongs to neither of the roles that the server takes, and neither may pass by row security or sign in', async () => {
    const roles = await world.clinic.rows(
      { name: z.string(), free: z.boolean(), owns: z.number() },
      `select rolname::text as name, rolsuper or rolbypassrls or rolcanlogin or rolcreaterole as free,
        (select count(*)::int from pg_class where relowner = r.oid) as owns
       from pg_roles r where rolname like 'rampwell\\_%' and rolname in ('rampwell_app', 'rampwell_house') order by 1`,
    );
    expect(roles).toEqual([
      { name: 'rampwell_app', free: false, owns: 0 },
      { name: 'rampwell_house', free: false, owns: 0 },
    ]);
    const user = (scope: Scope) =>
      app.transaction(scope, async (_db, execute) => (await execute('select current_user::text as name', [])).rows[0]);
    expect(await user('house')).toEqual({ name: 'rampwell_house' });
    expect(await user(scopeOf('clinician, own site'))).toEqual({ name: 'rampwell_app' });
  });

  it('of the trail may be added to and read by the server, and nothing else; nothing clinical may be removed', async () => {
    const rights = await world.clinic.rows(
      { name: z.string(), role: z.string(), may: z.string() },
      `select t.relname::text as name, r.role, coalesce(string_agg(p, ',' order by p) filter (where has_table_privilege(r.role, t.oid, p)), '') as may
       from pg_class t, unnest(array['rampwell_app', 'rampwell_house']) r(role), unnest(array['SELECT', 'INSERT', 'UPDATE', 'DELETE', 'TRUNCATE']) p
       where t.relnamespace = 'public'::regnamespace and t.relkind = 'r' group by 1, 2`,
    );
    const mayOf = (table: string) => rights.filter(({ name }) => name === table).map(({ may }) => may);
    expect(mayOf('audit_entry')).toEqual(['INSERT,SELECT', 'INSERT,SELECT']);
    expect(mayOf('audit_anchor').sort()).toEqual(['', 'INSERT,SELECT']);
    const removable = rights
      .filter(({ may }) => /DELETE|TRUNCATE/.test(may))
      .map(({ name, role }) => `${role} ${name}`);
    expect(removable.sort()).toEqual([
      'rampwell_app auth_session',
      ...['auth_session', 'auth_two_factor', 'auth_verification', 'heartbeat', 'key_seen', 'rate_limit'].map(
        (name) => `rampwell_house ${name}`,
      ),
    ]);
    const ofApp = Object.fromEntries(
      rights
        .filter(({ name, role }) => role === 'rampwell_app' && name in ofTheHouse)
        .map(({ name, may }) => [name, may]),
    );
    expect(ofApp).toEqual(ofTheHouse);
  });
});

const scopeOf = (who: Exclude<Who, 'anyone'>): Scope => {
  const { accountId, role, siteIds, participantId } = world.people[who];
  return { accountId, role, siteIds, participantId };
};
const nobody: Scope = { accountId: '', role: '', siteIds: [], participantId: null };

/** Rows that somebody sees of a table, and among them those that say anything of the record or its site. */
async function seen(scope: Scope, table: string): Promise<{ rows: number; ofRecord: number; ofSite: number }> {
  const { patient, siteId } = world.record;
  const [row] = await app.transaction(scope, async (_db, execute) => {
    const { rows } = await execute(
      `select count(*)::int as rows, count(*) filter (where t::text like $1)::int as "ofRecord", count(*) filter (where t::text like $2)::int as "ofSite"
       from "${table}" t`,
      [`%${patient.participantId}%`, `%${siteId}%`],
    );
    return z.array(z.object({ rows: z.number(), ofRecord: z.number(), ofSite: z.number() })).parse(rows);
  });
  if (!row) throw new Error('a count is a row');
  return row;
}

const readable = async () => (await guarded()).filter((name) => name !== 'auth_verification');

describe('plain SQL', () => {
  it('sees no row of any table without a scope, and adds none', async () => {
    for (const table of await readable())
      expect([table, await seen(nobody, table)]).toEqual([table, { rows: 0, ofRecord: 0, ofSite: 0 }]);
  });

  it('sees nothing of another site, and of an own one what there is', async () => {
    let own = 0;
    for (const table of await readable()) {
      for (const who of strangers.filter((each) => each !== 'participant, same site')) {
        const { ofRecord, ofSite } = await seen(scopeOf(who), table);
        // A caregiver once of this person, or of somebody else of the site, may know the site itself and who works there.
        const knowsSite = who.startsWith('caregiver');
        expect([table, who, ofRecord, knowsSite ? 0 : ofSite]).toEqual([table, who, 0, 0]);
      }
      own += (await seen(scopeOf('clinician, own site'), table)).ofRecord;
    }
    expect(own).toBeGreaterThan(100);
  });

  it('sees of a person’s records nothing as an administrator, and of others’ nothing as somebody of the same site', async () => {
    // Whose a stimulator is, an administrator must see; of that person the code alone leaves the server.
    const ofEquipment = ['participant', 'device_assignment'];
    for (const table of await readable()) {
      expect([table, (await seen(scopeOf('participant, same site'), table)).ofRecord]).toEqual([table, 0]);
      if (ofEquipment.includes(table)) continue;
      expect([table, (await seen(scopeOf('administrator, own site'), table)).ofRecord]).toEqual([table, 0]);
    }
  });

  it('forgets the scope with the transaction', async () => {
    const one = connect(url(), 2, () => undefined);
    const count = (scope: Scope) =>
      one.transaction(scope, async (_db, execute) => (await execute('select count(*)::int n from diary', [])).rows[0]);
    expect(await count(scopeOf('clinician, own site'))).not.toEqual({ n: 0 });
    expect(await count(nobody)).toEqual({ n: 0 });
    await one.close();
  });

  it('changes no row of another site, whatever the table', async () => {
    for (const table of await guarded()) {
      const columns = await world.clinic.rows(
        { name: z.string() },
        `select attname::text as name from pg_attribute where attrelid = $1::regclass and attnum > 0 order by attnum limit 1`,
        [table],
      );
      const changed = await app
        .transaction(scopeOf('clinician, other site'), async (_db, execute) => {
          const { rows } = await execute(
            `with changed as (update "${table}" t set ${columns[0]?.name} = ${columns[0]?.name} where t::text like $1 or t::text like $2 returning 1)
             select count(*)::int as n from changed`,
            [`%${world.record.patient.participantId}%`, `%${world.siteId}%`],
          );
          return z.array(z.object({ n: z.number() })).parse(rows)[0]?.n;
        })
        .catch((error: Error) => error.message);
      expect([table, changed === 0 || String(changed).startsWith('permission denied')]).toEqual([table, true]);
    }
  });

  it('adds no row to a record of another site', async () => {
    const tried: string[] = [];
    for (const table of await guarded()) {
      const [row] = await world.clinic.rows(
        { row: z.record(z.string(), z.unknown()) },
        `select to_jsonb(t) as row from "${table}" t where t::text like $1 limit 1`,
        [`%${world.record.patient.participantId}%`],
      );
      // Entries of the trail and mails are for everybody to add, each as themselves; the trail is tried below.
      if (!row || table === 'outbox') continue;
      tried.push(table);
      const copy = { ...row.row, ...('id' in row.row ? { id: randomUUID() } : {}) };
      const adding = app.transaction(scopeOf('clinician, other site'), async (_db, execute) => {
        await execute(`insert into "${table}" select (jsonb_populate_record(null::"${table}", $1::jsonb)).*`, [
          JSON.stringify(copy),
        ]);
      });
      await expect(adding).rejects.toThrow(/row-level security|permission denied|no stimulation under/);
    }
    expect(tried.length).toBeGreaterThan(20);
  });

  it('writes into the trail of no other site and no other person, nor in another’s name', async () => {
    const entry = (change: Record<string, unknown>) =>
      app
        .transaction(scopeOf('clinician, other site'), async (_db, execute) => {
          const row = {
            ...{
              chain: 'house',
              sequence: 1e9,
              at: await world.clinic.now(),
              actor_name: 'x',
              actor_role: 'x',
              action: 'x',
            },
            ...{
              actor_id: world.people['clinician, other site'].accountId,
              kind: 'write',
              previous_hash: 'x',
              hash: 'x',
            },
            ...change,
          };
          await execute(`insert into audit_entry select (jsonb_populate_record(null::audit_entry, $1::jsonb)).*`, [
            JSON.stringify(row),
          ]);
          throw new Error('added');
        })
        .catch((error: Error) => (error.message.includes('row-level security') ? 'refused' : error.message));
    const person = world.record.patient.participantId;
    expect([
      await entry({}),
      await entry({ chain: `site:${world.otherSiteId}`, site_id: world.otherSiteId }),
      await entry({ chain: `site:${world.siteId}`, site_id: world.siteId }),
      await entry({ chain: `participant:${person}`, participant_id: person }),
      await entry({ chain: `participant:${person}` }),
      await entry({ actor_id: world.people['clinician, own site'].accountId }),
    ]).toEqual(['added', 'added', 'refused', 'refused', 'refused', 'refused']);
  });
});

describe('a database of one’s own, whose owner may not make roles', () => {
  const name = `rampwell_own_${process.pid}`;
  const ownUrl = () => url().replace(/\/\/rampwell@(.*)\/[^/]+$/, `//${name}@$1/${name}`);
  beforeAll(() =>
    asSuperuser(async (client) => {
      await client.query(`create role ${name} login`);
      await client.query(`create database ${name} owner ${name}`);
    }),
  );
  afterAll(() =>
    asSuperuser(async (client) => {
      await client.query(`drop database ${name} with (force)`);
      await client.query(`drop role ${name}`);
    }),
  );

  it('says what an administrator must grant, and runs once that is done', async () => {
    const refusal = await migrate(ownUrl()).then(
      () => null,
      (error: Error) => (error.cause instanceof Error ? error.cause.message : error.message),
    );
    expect(refusal).toMatch(/GRANT rampwell_app, rampwell_house TO rampwell_own_/);
    await asSuperuser((client) => client.query(`grant rampwell_app, rampwell_house to ${name}`));
    await migrate(ownUrl());
    const own = connect(ownUrl(), 2, () => undefined);
    try {
      const count = (scope: Scope) =>
        own.transaction(scope, async (_db, execute) => (await execute('select count(*)::int n from site', [])).rows[0]);
      expect([await count('house'), await count(nobody)]).toEqual([{ n: 0 }, { n: 0 }]);
    } finally {
      await own.close();
    }
  });
});

describe('with the server’s own check of reach deceived', () => {
  const knocks = allKnocks().filter(({ contract }) => contract.reach !== 'open');
  const cells = (knock: Knock) =>
    strangers.filter((who) => knock.contract.who.some((role) => role === standingOf(who).role));

  it('lets everything through when the database is not asked, so that the refusals below are the database’s', async () => {
    const env = readEnv({ DATABASE_URL: url(), DEMO: '1', SECRET: secretOfTests });
    const transact = makeTransact(world.clinic.client, env, { mistake });
    const actions: readonly AnyAction[] = Object.values(api);
    let passed = 0;
    for (const knock of knocks.filter(
      ({ contract, sample }) => contract.method === 'GET' && sample.names === 'person',
    )) {
      const { contract, sample } = knock;
      const action = actions.find((each) => each.contract.name === contract.name);
      if (!action) throw new Error(`no action ${contract.name}`);
      const { params, query } = await sample.ask(world, sample.by);
      for (const who of cells(knock)) {
        // Whoever keeps a site is refused people's records by the door itself, wherever they are.
        if (standingOf(who).role === 'administrator') continue;
        const outcome = await transact.run(
          { ...action, scope: 'house' },
          {
            ...{
              actor: world.people[who],
              params: contract.params?.parse(params),
              body: undefined,
              key: null,
              file: null,
            },
            ...{ query: contract.query?.parse(query ?? {}), requestId: randomUUID() },
          },
        );
        expect([nameOf(knock), who, outcome.refusal?.code]).toEqual([nameOf(knock), who, undefined]);
        passed += 1;
      }
    }
    expect(passed).toBeGreaterThan(20);
  });

  it.each(titled(knocks.filter(({ sample }) => sample.names !== 'nothing')))(
    '%s is refused by the database alone to everybody out of reach, and nothing is written',
    async (_name, knock) => {
      const { contract, sample } = knock;
      const asked = await sample.ask(world, sample.by);
      const before = await fingerprints(world.clinic);
      for (const who of cells(knock)) {
        // Caregivers of somebody else of the site, and participants of it, reach the site itself.
        if (sample.names === 'site' && standingOf(who).role !== 'administrator' && !who.includes('other site'))
          continue;
        const key = contract.once ? randomUUID() : undefined;
        const answer = await knockAt(await world.as(who), contract, asked, key);
        const text = Buffer.isBuffer(answer.body) ? answer.body.toString('latin1') : answer.text;
        const { name, code, email } = world.record.patient;
        const held = [name, code, email, world.siteId, 'Cleo Roth'].filter((word) => text.includes(word));
        // A list of nothing is a refusal too.
        const isEmpty = answer.status === 200 && Array.isArray(answer.body.items) && answer.body.items.length === 0;
        expect([who, answer.status < 300 && !isEmpty, held]).toEqual([who, false, []]);
      }
      expect(await fingerprints(world.clinic)).toEqual(before);
    },
    60_000,
  );

  it.each(titled(knocks.filter(({ contract, sample }) => sample.names === 'nothing' && contract.method === 'GET')))(
    '%s shows nobody out of reach anything of the record',
    async (_name, knock) => {
      const { contract, sample } = knock;
      const asked = await sample.ask(world, sample.by);
      const { patient, courseId, permit, deviceId } = world.record;
      for (const who of cells(knock)) {
        const { text } = await knockAt(await world.as(who), contract, asked);
        const words = [patient.participantId, patient.code, patient.email, courseId, permit.id, deviceId];
        // Who is signed in is what the server was deceived about: it repeats that.
        const held = contract.name === 'account.read-me' ? [] : words.filter((word) => text.includes(word));
        expect([who, held]).toEqual([who, []]);
      }
    },
    60_000,
  );
});
