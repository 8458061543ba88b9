// Reports over a site, the sessions as CSV, and a person's own copy of everything.

import { getTableColumns, getTableName, is } from 'drizzle-orm';
import { PgTable } from 'drizzle-orm/pg-core';
import { z } from 'zod';
import { ownTables } from '@/db/queries/own-record';
import * as accountTables from '@/db/schema/account';
import * as courseTables from '@/db/schema/course';
import * as deviceTables from '@/db/schema/device';
import * as houseTables from '@/db/schema/house';
import * as participantTables from '@/db/schema/participant';
import * as sessionTables from '@/db/schema/session';
import * as siteTables from '@/db/schema/site';
import type { AccountActor } from '@/server/action';
import { inviteCaregiver } from '@/server/features/caregiver/invite-caregiver';
import { sendMessage } from '@/server/features/message/send-message';
import { csvLine } from '@/server/features/report/csv';
import { exportOwn } from '@/server/features/report/export-own';
import { exportSessions } from '@/server/features/report/export-sessions';
import { readSiteReport } from '@/server/features/report/read-site-report';
import { openClinic, type Clinic, type Patient } from '../support/clinic';
import { inForce } from '../support/prescribing';
import { keepDiary, makeReady } from '../support/records';
import { beginSession, recordSession } from '../support/sessions';

const daySeconds = 86_400;

let clinic: Clinic;
let siteId: string;
let clinician: AccountActor;
let monitor: AccountActor;
let stranger: AccountActor;
let ines: Patient;
let wanda: Patient;

beforeAll(async () => {
  clinic = await openClinic();
  siteId = await clinic.site('LS');
  clinician = await clinic.staff('Cora Clinician', 'clinician', siteId);
  monitor = await clinic.staff('Mona Monitor', 'monitor', siteId);
  stranger = await clinic.staff('Otto Other', 'clinician', await clinic.site('MR'));
  ines = await clinic.patient('Ines Marlow', siteId);
  wanda = await clinic.patient('Wanda Weaver', siteId);
  await makeReady(clinic, clinician, ines, siteId);
  for (const patient of [ines, wanda]) await inForce(clinic, clinician, patient);
  const first = await recordSession(clinic, ines, 1);
  const tingling = { kind: 'tingling', strength: 3, stillThere: false };
  await keepDiary(clinic, ines, first.sessionId, { effects: [tingling], headacheAfter: 4, freeText: 'A secret' });
  const half = await recordSession(clinic, wanda, 0.5);
  await keepDiary(clinic, wanda, half.sessionId, { effects: [{ ...tingling, strength: 6 }] });
  await clinic.advance(daySeconds);
  await recordSession(clinic, ines, 0.02);
  await clinic.client.pool.query(
    `update planned_session set closed_at = $1, closed_why = 'missed' where id in (
       select id from planned_session where participant_id = $2 and closed_at is null order by window_from limit 1)`,
    [await clinic.now(), wanda.participantId],
  );
});
afterAll(() => clinic.close());

async function nadiaInForce(): Promise<Patient> {
  const nadia = await clinic.patient('Nadia Now', siteId);
  await inForce(clinic, clinician, nadia);
  return nadia;
}

describe('the report of a site', () => {
  it('counts each person’s sessions, and leaves those still to come in neither side', async () => {
    const { items } = await clinic.call(monitor, readSiteReport, {});
    const of = (patient: Patient) => items.find(({ code }) => code === patient.code);
    expect(of(ines)).toMatchObject({ complete: 1, partial: 0, notDelivered: 1, missed: 0, planned: 2, worstEffect: 3 });
    expect(of(wanda)).toMatchObject({
      complete: 0,
      partial: 1,
      notDelivered: 0,
      missed: 1,
      planned: 2,
      worstEffect: 6,
    });
    expect(JSON.stringify(items)).not.toMatch(/Ines|Wanda/);
  });

  it('adds up to its totals, with the interval of the sum and how often each effect was felt', async () => {
    const { totals } = await clinic.call(clinician, readSiteReport, { query: { siteId } });
    expect(totals).toMatchObject({ participants: 2, complete: 1, planned: 4, missed: 1, openLockouts: 0 });
    // Wilson 95 % of 1 in 4.
    expect(totals.interval?.low).toBeCloseTo(0.0456, 4);
    expect(totals.interval?.high).toBeCloseTo(0.6994, 4);
    expect(totals.effects).toEqual([
      { kind: 'tingling', sessions: 2, ofSessions: 2 },
      { kind: 'headache', sessions: 1, ofSessions: 2 },
    ]);
  });

  it('comes page by page with the same totals', async () => {
    const first = await clinic.call(clinician, readSiteReport, { query: { limit: 1 } });
    const second = await clinic.call(clinician, readSiteReport, {
      query: { limit: 1, cursor: first.nextCursor ?? '' },
    });
    expect([...first.items, ...second.items].map(({ code }) => code)).toEqual([ines.code, wanda.code].sort());
    expect(second.nextCursor).toBeNull();
    expect(second.totals).toEqual(first.totals);
  });

  it('takes a session that is under way for neither done nor left undone', async () => {
    const { totals: before } = await clinic.call(clinician, readSiteReport, {});
    await beginSession(clinic, await nadiaInForce());
    const { totals } = await clinic.call(clinician, readSiteReport, {});
    expect(totals).toMatchObject({ complete: before.complete, planned: before.planned, missed: before.missed });
  });

  it('of another site is not there', async () => {
    expect((await clinic.refused(stranger, readSiteReport, { query: { siteId } })).status).toBe(404);
    expect((await clinic.refused(stranger, exportSessions, { query: { siteId } })).status).toBe(404);
    expect((await clinic.call(stranger, readSiteReport, {})).totals.participants).toBe(0);
  });
});

describe('the sessions as CSV', () => {
  const text = async (who: AccountActor) =>
    new TextDecoder().decode((await clinic.call(who, exportSessions, {})).bytes);

  it('has one line a session that began, by code alone', async () => {
    await clinic.advance(daySeconds);
    await recordSession(clinic, ines);
    const lines = (await text(monitor)).split('\r\n');
    expect(lines.at(-1)).toBe('');
    const [header = '', ...rows] = lines.slice(0, -1);
    expect(header.split(',').slice(0, 4)).toEqual(['site', 'participant', 'session', 'number']);
    expect(rows).toHaveLength(5);
    const cells = rows.map((row) =>
      Object.fromEntries(row.split(',').map((cell, index) => [header.split(',')[index], cell])),
    );
    const first = cells.find(({ participant, number }) => participant === ines.code && number === '1');
    expect(first).toMatchObject({
      ...{ site: 'LS', intensity_mA: '2', planned_min: '21', planned_C: '2.46', delivered_C: '2.46', fraction: '1' },
      ...{ completeness: 'complete', headache_after: '4', worst_effect: '3', effects: 'tingling 3', skin: 'ok' },
    });
    expect(await text(monitor)).not.toMatch(/Ines|Wanda|secret/);
  });

  it('holds nothing but its header where there is nothing', async () => {
    expect((await text(stranger)).split('\r\n')).toHaveLength(2);
  });

  it.each([
    ['a comma, b', '"a comma, b"'],
    ['a "word"', '"a ""word"""'],
    ['two\nlines', '"two\nlines"'],
    ['=1+1', `'=1+1`],
    ['+44 20', `'+44 20`],
    ['-3', `'-3`],
    ['@cmd', `'@cmd`],
    ['=a,b', `"'=a,b"`],
    [-3, '-3'],
    [null, ''],
  ])('writes %j as %s', (value, cell) => {
    expect(csvLine([value])).toBe(`${cell}\r\n`);
  });
});

describe('a person’s own copy', () => {
  const copy = z.object({
    participantId: z.string(),
    record: z.record(z.string(), z.array(z.record(z.string(), z.unknown()))),
  });
  const readCopy = async (who: AccountActor) => {
    const { bytes, type } = await clinic.call(who, exportOwn, {});
    expect(type).toBe('application/json');
    return copy.parse(JSON.parse(new TextDecoder().decode(bytes)));
  };

  it('holds every table that names the person', () => {
    const modules = [
      accountTables,
      courseTables,
      deviceTables,
      houseTables,
      participantTables,
      sessionTables,
      siteTables,
    ];
    const tables = modules.flatMap((tables) =>
      Object.values(tables).filter((value): value is PgTable => is(value, PgTable)),
    );
    const naming = tables.filter((table) =>
      Object.values(getTableColumns(table)).some(({ name }) => name === 'participant_id'),
    );
    expect(naming.length).toBeGreaterThan(15);
    const held = new Set(ownTables.map(({ table }) => getTableName(table)));
    expect(naming.map(getTableName).filter((name) => !held.has(name))).toEqual([]);
  });

  it('has what the person said and felt, and nobody else’s', async () => {
    await clinic.call(ines, sendMessage, { body: { text: 'May I swim?' } });
    const shares = { adherence: true, diary: true, missedMail: true };
    await clinic.call(ines, inviteCaregiver, { body: { name: 'Tam', email: 'tam@harrowmere.example', shares } });
    const { record, participantId } = await readCopy(ines);
    expect(participantId).toBe(ines.participantId);
    expect(Object.keys(record).sort()).toEqual(ownTables.map(({ name }) => name).sort());
    expect(record.message?.map(({ text }) => text)).toEqual(['May I swim?']);
    expect(record.session).toHaveLength(3);
    expect(record.caregiver_share).toHaveLength(1);
    expect(record.account?.map(({ email }) => email)).toEqual([ines.email]);
    expect(JSON.stringify(record.diary)).toContain('A secret');
    expect(JSON.stringify(record)).not.toContain(wanda.participantId);
  });

  it('keeps back what opens a door', async () => {
    const text = JSON.stringify((await readCopy(ines)).record);
    expect(text).not.toMatch(/stopTokenHash|"token"|passwordHash/);
  });

  it('is nobody’s but a participant’s', async () => {
    expect((await clinic.refused(clinician, exportOwn, {})).status).toBe(404);
  });
});
