// What the database refuses by itself, whoever asks by whatever way: doses above the compiled-in ceilings, a second live permit, changed
// or removed records. Plain SQL on the connections that the server has.
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { ceilings } from '@/shared/rules/ceilings';
import { type Clinic, type Patient } from '../support/clinic';
import { inForce } from '../support/prescribing';
import { permitFor, quietDiary, readyPatient, runSession, type ReadyPatient, openMorning } from '../support/running';

let clinic: Clinic;
let siteId: string;
let oona: AccountActor;
/** With a session that is over, its diary, and a live permit. */
let ready: ReadyPatient;
let person: Patient;
let permitId: string;

beforeAll(async () => {
  ({ clinic, siteId, oona } = await openMorning());
  ready = await readyPatient(clinic, oona, siteId, { schedule: { hoursFrom: '00:00', hoursTo: '23:59' } });
  person = ready.patient;
  const done = await runSession(clinic, ready);
  await quietDiary(clinic, person, done);
  await clinic.advance(86_400);
  permitId = (await permitFor(clinic, ready)).id;
}, 120_000);
afterAll(() => clinic.close());

const sql = (text: string, values: unknown[] = []) => clinic.client.pool.query(text, values);

/** Runs SQL and takes it back; answers with the name of what refused it, null where it passed. */
async function tried(text: string, values: unknown[] = []): Promise<string | null> {
  const connection = await clinic.client.pool.connect();
  try {
    await connection.query('begin');
    await connection.query(text, values);
    return null;
  } catch (error) {
    if (!(error instanceof Error)) throw error;
    return 'constraint' in error && typeof error.constraint === 'string' ? error.constraint : error.message;
  } finally {
    await connection.query('rollback');
    connection.release();
  }
}

/** A copy of the version in force as a new draft, but for what is given. */
const copyOfPrescription = (change: Record<string, unknown>, participantId = person.participantId) =>
  tried(
    `insert into prescription select (jsonb_populate_record(p, jsonb_build_object('id', $2::text, 'version', null, 'signed_at', null,
       'closed_at', null, 'closed_why', null) || $3::jsonb)).* from prescription p where p.participant_id = $1 order by created_at limit 1`,
    [participantId, randomUUID(), JSON.stringify(change)],
  );

/** µA, ms and µC of a trapezoid, with the charge that it has. */
function curve(intensityUa: number, holdMs: number, rampMs = 30_000) {
  const chargeUc = Math.ceil((intensityUa * (2 * holdMs + 2 * rampMs)) / 2000);
  const ramps = { ramp_up_ms: rampMs, ramp_down_ms: rampMs };
  return { intensity_ua: intensityUa, hold_ms: holdMs, ...ramps, on_ms: holdMs + 2 * rampMs, charge_uc: chargeUc };
}

const padsOf = (area: number) => [
  { position: 'F3', polarity: 'anode', shape: 'pad', areaSquareCentimetre: area, share: 1 },
  { position: 'Fp2', polarity: 'cathode', shape: 'pad', areaSquareCentimetre: 60, share: 1 },
];

const ua = (milliamp: number) => Math.round(milliamp * 1000);
const atCeiling = ua(ceilings.currentMilliamp.value);
const msMost = ceilings.minutes.value * 60_000;
const ucMost = ceilings.chargeCoulomb.value * 1_000_000;
const rampLeast = ceilings.leastRampSeconds.value * 1000;
const rampMost = ceilings.mostRampSeconds.value * 1000;
const dayMost = ceilings.minutesPerDay.value * 60_000;
const gapLeast = ceilings.leastGapHours.value * 3_600_000;

/** Each limit just inside, at it, just outside, and the constraint that refuses what is outside. */
const bounds: [string, string, (where: -1 | 0 | 1) => Record<string, unknown>][] = [
  ['current', 'prescription_intensity_ceiling', (step) => curve(atCeiling + step, 600_000)],
  ['minutes', 'prescription_minutes_ceiling', (step) => curve(1000, msMost - 60_000 + step)],
  ['charge', 'prescription_charge_ceiling', (step) => ({ ...curve(1000, 600_000), charge_uc: ucMost + step })],
  ['shortest ramp up', 'prescription_ramp_up_bounds', (step) => rampsOf(rampLeast - step, 30_000)],
  ['longest ramp up', 'prescription_ramp_up_bounds', (step) => rampsOf(rampMost + step, 30_000)],
  ['shortest ramp down', 'prescription_ramp_down_bounds', (step) => rampsOf(30_000, rampLeast - step)],
  ['longest ramp down', 'prescription_ramp_down_bounds', (step) => rampsOf(30_000, rampMost + step)],
  [
    'minutes a day',
    'prescription_day_ceiling',
    (step) => ({ ...curve(1000, dayMost / 2 - 60_000 + step), max_per_day: 2 }),
  ],
  ['gap', 'prescription_gap_floor', (step) => ({ min_gap_ms: gapLeast - step })],
  [
    'current density',
    'prescription_density_ceiling',
    // 4 mA on 25 cm² is the ceiling.
    (step) => ({ ...curve(4000, 600_000), electrodes: padsOf(25 - step * 0.001) }),
  ],
];

function rampsOf(up: number, down: number) {
  const on = { hold_ms: 600_000, on_ms: 600_000 + up + down, intensity_ua: 1000 };
  return { ...on, ramp_up_ms: up, ramp_down_ms: down, charge_uc: Math.ceil((2 * 600_000 + up + down) / 2) };
}

describe('the ceilings of a prescription', () => {
  it.each(bounds)('%s: passes just inside and at the limit, and is refused just outside', async (_name, by, make) => {
    const found = [];
    for (const step of [-1, 0, 1] as const) found.push(await copyOfPrescription(make(step)));
    expect(found).toEqual([null, null, by]);
  });

  it('refuse what the row itself does not bear out: time, charge, pads that cannot be read, a signed beginning', async () => {
    expect([
      await copyOfPrescription({ ...curve(1000, 600_000), on_ms: 600_000 }),
      await copyOfPrescription({ ...curve(1000, 600_000), charge_uc: 629_999 }),
      await copyOfPrescription({ electrodes: {} }),
      await copyOfPrescription({ electrodes: padsOf(0) }),
      await copyOfPrescription({ version: 9, signed_at: await clinic.now() }),
    ]).toEqual([
      'prescription_whole_time',
      'prescription_whole_charge',
      'prescription_density_ceiling',
      'prescription_density_ceiling',
      'prescription_draft_first',
    ]);
  });

  it('hold for the young by their birthday: nobody under 12, no more than 2 mA under 18', async () => {
    const born = async (years: number, days: number) => {
      const [row] = await clinic.rows(
        { on: z.string() },
        `select (($1::timestamptz at time zone 'UTC')::date - make_interval(years => $2) + make_interval(days => $3))::date::text as on`,
        [await clinic.now(), years, days],
      );
      return row?.on;
    };
    const draftFor = async (bornOn: string | undefined, intensityUa: number) => {
      const child = await clinic.patient('Young', siteId, { bornOn: bornOn ?? '' });
      const change = { ...curve(intensityUa, 600_000), participant_id: child.participantId };
      return copyOfPrescription(change);
    };
    const [twelve, notTwelve] = [await born(ceilings.leastAgeYears.value, 0), await born(12, 3)];
    const [adult, minor] = [await born(ceilings.adultAgeYears.value, 0), await born(18, 3)];
    const most = ua(ceilings.minorCurrentMilliamp.value);
    expect([
      await draftFor(twelve, 1000),
      await draftFor(notTwelve, 1000),
      await draftFor(adult, most + 1),
      await draftFor(minor, most - 1),
      await draftFor(minor, most),
      await draftFor(minor, most + 1),
    ]).toEqual([null, 'age_floor', null, null, null, 'minor_intensity_ceiling']);
  });

  it('are in force only with signatures over the content: none is too few, and so is one where two are asked', async () => {
    const id = randomUUID();
    const text = `with draft as (insert into prescription select (jsonb_populate_record(p, jsonb_build_object('id', $2::text, 'tier', $3::text,
        'version', null, 'signed_at', null, 'closed_at', null, 'closed_why', null))).* from prescription p where p.participant_id = $1
        order by created_at limit 1 returning id) select id from draft`;
    const connection = await clinic.client.pool.connect();
    const sign = () => connection.query('update prescription set version = 99, signed_at = now() where id = $1', [id]);
    const addSignature = (account: string, meaning: string) =>
      connection.query(
        `insert into signature (id, subject_kind, subject_id, account_id, name, role, meaning, content_hash, created_at, confirmed_at)
         select gen_random_uuid(), 'prescription', p.id, $2, 'N', 'clinician', $3, p.content_hash, now(), now() from prescription p where p.id = $1`,
        [id, account, meaning],
      );
    const refusedAt = async () => {
      await connection.query('savepoint here');
      const refused = await sign().then(
        () => null,
        (error: { constraint?: string }) => error.constraint,
      );
      await connection.query('rollback to here');
      return refused;
    };
    try {
      await connection.query('begin');
      await connection.query(
        `update prescription set closed_at = now(), closed_why = 'superseded' where participant_id = $1 and closed_at is null`,
        [person.participantId],
      );
      await connection.query(text, [person.participantId, id, 'second_signature']);
      const found = [await refusedAt()];
      await addSignature('one', 'prescribed');
      found.push(await refusedAt());
      await addSignature('two', 'second_signature');
      found.push(await refusedAt());
      expect(found).toEqual(['prescription_signatures', 'prescription_signatures', null]);
    } finally {
      await connection.query('rollback');
      connection.release();
    }
  });
});

describe('a permit', () => {
  /** A copy of the live one for the same person, but for what is given; the live one is closed first unless `beside`. */
  async function copyOfPermit(change: Record<string, unknown>, beside = false): Promise<string | null> {
    const close = beside
      ? ''
      : `update permit set closed_at = now(), closed_why = 'void_test' where id = '${permitId}';`;
    const json = JSON.stringify({
      id: randomUUID(),
      key: randomUUID(),
      counter: 999,
      closed_at: null,
      closed_why: null,
      ...change,
    });
    // Simple protocol: two statements in one, nothing of it comes from outside.
    return tried(`${close} with check_of as (
        insert into precheck select (jsonb_populate_record(c, jsonb_build_object('id', gen_random_uuid()))).* from precheck c
        where c.participant_id = '${person.participantId}' limit 1 returning id)
      insert into permit select (jsonb_populate_record(p, '${json}'::jsonb || jsonb_build_object('precheck_id', check_of.id))).*
      from permit p, check_of where p.id = '${permitId}'`);
  }

  it('passes as a copy of one that was issued, so that the refusals here say something', async () => {
    expect(await copyOfPermit({})).toBeNull();
  });

  it('is refused beside a live one of the same person', async () => {
    expect(await copyOfPermit({}, true)).toBe('permit_one_live');
  });

  it.each([
    ['more current', { intensity_ua: 2001 }],
    ['less current', { intensity_ua: 1999 }],
    ['more charge', { charge_uc: 2_460_001 }],
    ['more time', { on_ms: 1_260_001 }],
  ])('is refused with %s than prescribed', async (_name, change) => {
    expect(await copyOfPermit(change)).toBe('permit_as_prescribed');
  });

  it('is refused for 4.1 mA, 40 min and a bit, and 7.2 C and a bit, even if a prescription said so', async () => {
    const definitions = await clinic.rows(
      { name: z.string(), text: z.string() },
      `select conname::text as name, pg_get_constraintdef(oid) as text from pg_constraint where conrelid = 'permit'::regclass and contype = 'c' order by 1`,
    );
    expect(definitions).toEqual([
      { name: 'permit_charge_ceiling', text: `CHECK (((charge_uc > 0) AND (charge_uc <= ${ucMost})))` },
      { name: 'permit_intensity_ceiling', text: `CHECK (((intensity_ua > 0) AND (intensity_ua <= ${atCeiling})))` },
      { name: 'permit_minutes_ceiling', text: `CHECK (((on_ms > 0) AND (on_ms <= ${msMost})))` },
    ]);
  });

  it('is refused for a version that is not signed, that ended, or that is somebody else’s', async () => {
    const other = await clinic.patient('Somebody Else', siteId);
    const theirs = await inForce(clinic, oona, other);
    expect(await copyOfPermit({ prescription_id: theirs.id })).toBe('permit_as_prescribed');
    const ended = `update prescription set closed_at = now(), closed_why = 'superseded' where participant_id = '${person.participantId}' and closed_at is null;`;
    const json = JSON.stringify({ id: randomUUID(), key: 'k', counter: 998 });
    expect(
      await tried(
        `${ended} insert into permit select (jsonb_populate_record(p, '${json}'::jsonb)).* from permit p where p.id = '${permitId}'`,
      ),
    ).toBe('permit_as_prescribed');
  });

  it('is refused closed from the start', async () => {
    expect(await copyOfPermit({ closed_at: await clinic.now(), closed_why: 'used' })).toBe('permit_live_first');
  });

  /**
   * A record of the last hours that says how much was delivered, beside which a permit of 2.46 C and 21 min is asked for.
   * @param hours since it ended
   */
  async function beside(hours: number, upperUc: number, onMs: number): Promise<string | null> {
    const session = JSON.stringify({
      id: randomUUID(),
      started_at: null,
      closed_why: 'recorded',
      upper_uc: upperUc,
      on_ms: onMs,
    });
    const earlier = JSON.stringify({ id: randomUUID(), key: randomUUID(), counter: 997 });
    const at = (await clinic.now()).replace('Z', '+00');
    const ended = `'${at}'::timestamptz - interval '${hours} hours'`;
    const own = `participant_id = '${person.participantId}'`;
    const check = (
      name: string,
    ) => `${name} as (insert into precheck select (jsonb_populate_record(c, jsonb_build_object('id', gen_random_uuid()))).*
      from precheck c where c.${own} limit 1 returning id)`;
    return tried(`
      update permit set closed_at = now(), closed_why = 'void_test' where id = '${permitId}';
      with ${check('c')} insert into permit select (jsonb_populate_record(p, '${earlier}'::jsonb || jsonb_build_object('precheck_id', c.id,
        'closed_at', null, 'closed_why', null, 'issued_at', '${at}'::timestamptz - interval '30 days'))).* from permit p, c where p.id = '${permitId}';
      insert into session select (jsonb_populate_record(s, '${session}'::jsonb || jsonb_build_object('permit_id', '${JSON.parse(earlier).id}',
        'created_at', ${ended}, 'ended_at', ${ended}, 'closed_at', ${ended}))).* from session s where s.${own} limit 1;
      update permit set closed_at = now(), closed_why = 'used' where id = '${JSON.parse(earlier).id}';
      with ${check('c')} insert into permit select (jsonb_populate_record(p, jsonb_build_object('id', gen_random_uuid(), 'key', 'last', 'counter', 996,
        'precheck_id', c.id, 'closed_at', null, 'closed_why', null, 'issued_at', '${at}'::timestamptz))).* from permit p, c where p.id = '${permitId}'`);
  }

  it('is refused on top of 24 h and 7 days that are full, to the microcoulomb and millisecond', async () => {
    const [dayUc, weekUc] = [ceilings.charge24hCoulomb.value * 1e6, ceilings.charge7dCoulomb.value * 1e6];
    const own = 2_460_000;
    // The session of the day before is over for a day less some minutes, so it still counts: take it off.
    const [known] = await clinic.rows(
      { uc: z.coerce.number(), ms: z.number(), day: z.boolean() },
      `select upper_uc as uc, on_ms as ms, ended_at > $2::timestamptz - interval '24 hours' as day from session
       where participant_id = $1 and closed_at is not null`,
      [person.participantId, await clinic.now()],
    );
    const inDay = known?.day ? known : { uc: 0, ms: 0 };
    const room = dayUc - own - inDay.uc;
    const weekRoom = weekUc - own - (known?.uc ?? 0);
    const msRoom = dayMost - 1_260_000 - inDay.ms;
    expect([
      await beside(1, room, 0),
      await beside(1, room + 1, 0),
      await beside(24, room + 1, 0),
      await beside(30, weekRoom, 0),
      await beside(30, weekRoom + 1, 0),
      await beside(168, weekRoom + 1, 0),
      await beside(1, 0, msRoom),
      await beside(1, 0, msRoom + 1),
    ]).toEqual([
      ...[null, 'permit_charge_24h_ceiling', null, null, 'permit_charge_7d_ceiling', null],
      ...[null, 'permit_minutes_24h_ceiling'],
    ]);
  });
});

describe('records', () => {
  /** The tables that hold what happened, each with a column that somebody might like to be otherwise. */
  const records: [table: string, column: string, value: string][] = [
    ['prescription', 'intensity_ua', '1000'],
    ['permit', 'charge_uc', '1'],
    ['session', 'permit_id', 'gen_random_uuid()'],
    ['session_event', 'body', `'{}'`],
    ['diary', 'answers', `'{}'`],
    ['precheck', 'answers', `'{}'`],
    ['signature', 'name', `'Nobody'`],
    ['acknowledgement', 'created_at', 'now()'],
    ['consent', 'signed_on', `'2020-01-01'`],
    ['screening', 'outcome', `'clear'`],
    ['training', 'signed_off', 'true'],
    ['watched_session', 'place', `'live_video'`],
    ['planned_session', 'window_to', 'now()'],
    ['device_assignment', 'device_id', 'gen_random_uuid()'],
    ['device_state', 'state', `'stock'`],
    ['course', 'participant_id', 'gen_random_uuid()'],
    ['participant', 'name', `'Nobody'`],
    ['protocol', 'settings', `'{}'`],
    ['audit_entry', 'actor_name', `'Nobody'`],
  ];

  it.each(records)('of %s are neither changed nor removed', async (table, column, value) => {
    const [found] = await clinic.rows({ n: z.number() }, `select count(*)::int n from ${table}`);
    expect(found?.n).toBeGreaterThan(0);
    const refusal = /never change|never removed|cannot change so|is closed|permission denied/;
    expect(await tried(`update ${table} set ${column} = ${value}`)).toMatch(refusal);
    expect(await tried(`delete from ${table}`)).toMatch(refusal);
    expect(await tried(`truncate ${table} cascade`)).toMatch(refusal);
  });

  it('of a session take no second event under a number or an id that is taken', async () => {
    const copy = (change: string) =>
      tried(`insert into session_event select (jsonb_populate_record(e, ${change})).* from session_event e limit 1`);
    expect(await copy(`jsonb_build_object('sequence', 9999)`)).toBe('session_event_session_id_id_pk');
    expect(await copy(`jsonb_build_object('id', gen_random_uuid())`)).toBe('session_event_sequence');
    expect(await copy(`jsonb_build_object('id', gen_random_uuid(), 'sequence', 9999)`)).toBeNull();
  });

  it('stay as they are after all these tries', async () => {
    const { rows } = await sql('select count(*)::int as live from permit where closed_at is null');
    expect(rows).toEqual([{ live: 1 }]);
  });
});
