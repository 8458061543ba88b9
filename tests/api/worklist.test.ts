// The worklist: its order and pages, whose a row is, what a monitor sees, claims and the pages that they stop.

import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { closeItem, openItem, type NewItem } from '@/db/queries/worklist';
import { claimItem } from '@/server/features/worklist/claim-item';
import { readWorklist } from '@/server/features/worklist/read-worklist';
import { rankWorklist } from '@/shared/rules/worklist';
import { worklistLevels, type WorklistLevel } from '@/shared/values/codes';
import { openClinic, type Clinic, type Patient } from '../support/clinic';
import { inForce } from '../support/prescribing';
import { givePermit } from '../support/sessions';

let clinic: Clinic;
let sites = 0;

beforeAll(async () => {
  clinic = await openClinic();
});
afterAll(() => clinic.close());

/** A site of one's own for each test: what stands on one worklist is nobody else's. */
async function ward(): Promise<{ siteId: string; oona: AccountActor; quill: AccountActor; patient: Patient }> {
  sites += 1;
  const siteId = await clinic.site(`W${String.fromCharCode(64 + sites)}`);
  const oona = await clinic.staff('Oona Feld', 'clinician', siteId);
  const quill = await clinic.staff('M. Quill', 'coordinator', siteId);
  return { siteId, oona, quill, patient: await clinic.patient('Ines Marlow', siteId) };
}

async function open(siteId: string, patient: Patient, more: Partial<NewItem> = {}): Promise<string> {
  const id = randomUUID();
  const own = {
    id,
    siteId,
    participantId: patient.participantId,
    level: 'look',
    why: 'first_session',
    facts: { number: 1 },
  } as const;
  await openItem(clinic.client.db, { ...own, matter: id, openedAt: await clinic.now(), ...more });
  return id;
}

const read = (who: AccountActor, query = {}) => clinic.call(who, readWorklist, { query });
const claim = (who: AccountActor, itemId: string, isClaimed = true) =>
  clinic.call(who, claimItem, { params: { itemId }, body: { claim: isClaimed } });

async function escalation(itemId: string): Promise<string | null> {
  const [row] = await clinic.rows(
    { at: z.date().nullable() },
    'select escalate_at at from worklist_item where id = $1',
    [itemId],
  );
  return row?.at?.toISOString() ?? null;
}

describe('the order', () => {
  it('is the rule’s over every level, owned or not, and old and new, whatever the length of a page', async () => {
    const { siteId, oona, quill, patient } = await ward();
    const levels: WorklistLevel[] = [...worklistLevels, ...worklistLevels, 'look', 'look'];
    for (const [at, level] of levels.entries()) {
      const openedAt = new Date(Date.parse(await clinic.now()) - ((at * 7) % 5) * 3_600_000).toISOString();
      const id = await open(siteId, patient, { level, openedAt });
      if (at % 3 === 0) await claim(at % 2 === 0 ? oona : quill, id);
    }
    const whole = (await read(oona)).items;
    expect(whole).toHaveLength(levels.length);
    const facts = whole.map(({ id, level, openedAt, owner }) => ({
      id,
      level,
      openedAt,
      ownerAccountId: owner?.accountId ?? null,
    }));
    expect(rankWorklist(facts).map(({ id }) => id)).toEqual(facts.map(({ id }) => id));

    for (const limit of [1, 3, 5]) {
      const paged: string[] = [];
      for (let cursor: string | null = ''; cursor !== null;) {
        const page: Awaited<ReturnType<typeof read>> = await read(oona, cursor === '' ? { limit } : { limit, cursor });
        paged.push(...page.items.map(({ id }) => id));
        cursor = page.nextCursor;
      }
      expect(paged).toEqual(facts.map(({ id }) => id));
    }
  });

  it('refuses a cursor that it did not make', async () => {
    const { oona } = await ward();
    const odd = [
      ['nobody', 'dire', '2026-01-01T00:00:00.000Z', randomUUID()],
      ['owned', 'look', 'soon', randomUUID()],
      ['x'],
      ['nobody', 'look', '2026-01-01T00:00:00.000Z', 'y'],
    ];
    for (const values of odd) {
      const cursor = Buffer.from(JSON.stringify(values)).toString('base64url');
      expect(await clinic.refused(oona, readWorklist, { query: { cursor } })).toMatchObject({
        status: 422,
        fields: [{ code: 'cursor_unknown' }],
      });
    }
  });
});

describe('a row', () => {
  it('carries why, since when, the next step and the strip of the person’s course', async () => {
    const { siteId, oona, patient } = await ward();
    await inForce(clinic, oona, patient, { schedule: { sessionsTotal: 4 } });
    const { sessionId } = await givePermit(clinic, patient);
    await open(siteId, patient, { sessionId, facts: { number: 1, kind: 'tingling', isNew: true, left: null } });
    const { items, needing, goingOn } = await read(oona);
    expect([items.length, needing, goingOn]).toEqual([1, 1, 0]);
    expect(items[0]).toMatchObject({
      name: 'Ines Marlow',
      code: patient.code,
      why: 'first_session',
      next: 'open_session',
      owner: null,
    });
    expect(items[0]?.facts).toEqual({ number: 1, kind: 'tingling', isNew: true, left: null });
    expect(items[0]?.marks.map(({ state }) => state)).toEqual(['next', 'planned', 'planned', 'planned']);
  });

  it('is opened once a matter, and again only after it was closed', async () => {
    const { siteId, oona, patient } = await ward();
    const item = {
      siteId,
      participantId: patient.participantId,
      level: 'flag',
      why: 'missed_three',
      facts: {},
      matter: 'missed_three',
    } as const;
    const openedAt = await clinic.now();
    const id = randomUUID();
    expect(await openItem(clinic.client.db, { ...item, id, openedAt })).toBe(true);
    expect(await openItem(clinic.client.db, { ...item, id: randomUUID(), openedAt })).toBe(false);
    expect(await closeItem(clinic.client.db, id, openedAt, 'noted')).toBe(true);
    expect(await closeItem(clinic.client.db, id, openedAt, 'noted')).toBe(false);
    expect(await openItem(clinic.client.db, { ...item, id: randomUUID(), openedAt })).toBe(true);
    expect((await read(oona)).items).toHaveLength(1);
  });

  it('is nobody’s business at another site', async () => {
    const here = await ward();
    const there = await ward();
    const id = await open(here.siteId, here.patient);
    expect((await read(there.oona)).items).toEqual([]);
    expect(
      (await clinic.refused(there.oona, claimItem, { params: { itemId: id }, body: { claim: true } })).status,
    ).toBe(404);
  });

  it('shows a monitor the code where a name would stand, and finds nobody by name for one', async () => {
    const { siteId, patient } = await ward();
    await open(siteId, patient);
    const monitor = await clinic.staff('Monitor', 'monitor', siteId);
    expect((await read(monitor)).items[0]).toMatchObject({ name: patient.code, code: patient.code });
    expect((await read(monitor, { search: 'Marlow' })).items).toEqual([]);
    expect((await read(monitor, { search: patient.code.toLowerCase() })).items).toHaveLength(1);
  });
});

describe('finding', () => {
  it('goes by name, code and device, and takes signs for what they are', async () => {
    const { siteId, oona, patient } = await ward();
    const other = await clinic.patient('100 % Wren_Asquith', siteId);
    await open(siteId, patient);
    await open(siteId, other);
    const deviceId = randomUUID();
    await clinic.client.pool.query(
      `insert into device (id, site_id, label, model, serial, firmware, calibration_due_on, created_at) values ($1::uuid, $2, 'LS-07', 'M', $1::text, '1', '2030-01-01', now())`,
      [deviceId, siteId],
    );
    await clinic.client.pool.query(
      `insert into device_assignment (id, device_id, participant_id, by, created_at) values ($1, $2, $3, 'x', now())`,
      [randomUUID(), deviceId, patient.participantId],
    );
    const names = async (search: string) => (await read(oona, { search })).items.map(({ name }) => name);
    expect(await names('marlow')).toEqual(['Ines Marlow']);
    expect(await names('ls-07')).toEqual(['Ines Marlow']);
    expect(await names('%')).toEqual(['100 % Wren_Asquith']);
    expect(await names('n_A')).toEqual(['100 % Wren_Asquith']);
    expect(await names('\\')).toEqual([]);
  });

  it('of mine and nobody’s leaves out what others have', async () => {
    const { siteId, oona, quill, patient } = await ward();
    const [mine, theirs, free] = [
      await open(siteId, patient),
      await open(siteId, patient),
      await open(siteId, patient),
    ];
    await claim(oona, mine);
    await claim(quill, theirs);
    const found = await read(oona, { whose: 'mine_and_nobodys' });
    expect(found.items.map(({ id }) => id)).toEqual([free, mine]);
    expect(found.needing).toBe(3);
  });
});

describe('a claim', () => {
  it('names the owner, and stops a page', async () => {
    const { siteId, oona, quill, patient } = await ward();
    const id = await open(siteId, patient, { level: 'safety', why: 'burn_or_blister', escalateAt: await clinic.now() });
    expect((await claim(quill, id)).owner).toEqual({ accountId: quill.accountId, name: 'M. Quill', isMe: true });
    expect(await escalation(id)).toBeNull();
    expect((await read(oona)).items[0]?.owner).toMatchObject({ name: 'M. Quill', isMe: false });
    expect((await claim(oona, id)).owner).toMatchObject({ isMe: true });
  });

  it('that is given back leaves the row to nobody, and a safety page goes on', async () => {
    const { siteId, oona, patient } = await ward();
    const id = await open(siteId, patient, { level: 'safety', why: 'burn_or_blister', escalateAt: await clinic.now() });
    await claim(oona, id);
    const before = Date.parse(await clinic.now());
    expect((await claim(oona, id, false)).owner).toBeNull();
    expect(Date.parse((await escalation(id)) ?? '')).toBeGreaterThanOrEqual(before + 30 * 60_000);
  });

  it('twice by the same person is kept once', async () => {
    const { siteId, oona, patient } = await ward();
    const id = await open(siteId, patient);
    await claim(oona, id);
    await claim(oona, id);
    expect(
      await clinic.rows({ n: z.number() }, 'select count(*)::int n from worklist_claim where item_id = $1', [id]),
    ).toEqual([{ n: 1 }]);
  });

  it('is refused on a closed row', async () => {
    const { siteId, oona, patient } = await ward();
    const id = await open(siteId, patient);
    await closeItem(clinic.client.db, id, await clinic.now(), 'noted');
    expect((await clinic.refused(oona, claimItem, { params: { itemId: id }, body: { claim: true } })).code).toBe(
      'worklist.closed',
    );
  });
});

describe('the count of those who go on as prescribed', () => {
  it('leaves out who has an open row, no prescription in force, or a pause', async () => {
    const { siteId, oona, patient } = await ward();
    const quiet = await clinic.patient('Quiet', siteId);
    const paused = await clinic.patient('Paused', siteId);
    for (const one of [patient, quiet, paused]) await inForce(clinic, oona, one);
    await clinic.client.pool.query(
      `insert into course_pause (id, course_id, reason, by, created_at) select $1, id, 'x', 'x', now() from course where participant_id = $2`,
      [randomUUID(), paused.participantId],
    );
    await open(siteId, patient);
    expect(await read(oona)).toMatchObject({ needing: 1, goingOn: 1 });
  });
});
