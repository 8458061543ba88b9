// Sites, their staff and their protocols: who belongs, who may sign, what is refused.

import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { changeProtocol } from '@/server/features/protocol/change-protocol';
import { listProtocols } from '@/server/features/protocol/list-protocols';
import { addSite } from '@/server/features/site/add-site';
import { inviteStaff } from '@/server/features/site/invite-staff';
import { listSites } from '@/server/features/site/list-sites';
import { listStaff } from '@/server/features/site/list-staff';
import { suspendStaff } from '@/server/features/site/suspend-staff';
import type { AccountActor } from '@/server/action';
import { defaultProtocolSettings } from '@/shared/rules/protocol-defaults';
import { openClinic, type Clinic } from '../support/clinic';

let clinic: Clinic;
let siteId: string;
let otherSiteId: string;
let admin: AccountActor;

beforeAll(async () => {
  clinic = await openClinic();
  siteId = await clinic.site('LS');
  otherSiteId = await clinic.site('MR');
  admin = await clinic.staff('Ada Admin', 'administrator', siteId);
});
afterAll(() => clinic.close());

const place = {
  name: 'Harbour House',
  code: 'HH',
  kind: 'service' as const,
  phone: '020 7946 0200',
  emergencyNumber: '999',
  zone: 'Europe/London',
};

describe('sites', () => {
  it('are added with their administrator as a member, and seen by members alone', async () => {
    const site = await clinic.call(admin, addSite, { body: place });
    const { rows } = await clinic.client.pool.query('select account_id from membership where site_id = $1', [site.id]);
    expect(rows).toEqual([{ account_id: admin.accountId }]);
    const member = { ...admin, siteIds: [siteId, site.id] };
    const { items } = await clinic.call(member, listSites, {});
    expect(items.map(({ code }) => code)).toEqual(['HH', 'LS']);
    expect((await clinic.call(admin, listSites, {})).items.map(({ code }) => code)).toEqual(['LS']);
  });

  it('keep their codes to themselves', async () => {
    const body = { ...place, code: 'LS' };
    expect((await clinic.refused(admin, addSite, { body })).code).toBe('site.code_taken');
  });

  it('come a page at a time without loss or repetition', async () => {
    const everywhere = { ...admin, siteIds: [siteId, otherSiteId] };
    const first = await clinic.call(everywhere, listSites, { query: { limit: 1 } });
    expect(first.items.map(({ code }) => code)).toEqual(['LS']);
    const second = await clinic.call(everywhere, listSites, { query: { limit: 1, cursor: first.nextCursor ?? '' } });
    expect(second.items.map(({ code }) => code)).toEqual(['MR']);
    expect(second.nextCursor).toBeNull();
  });

  it('refuse a cursor that they did not make', async () => {
    const refusal = await clinic.refused(admin, listSites, { query: { cursor: 'eyJ4IjoxfQ' } });
    expect([refusal.status, refusal.fields?.[0]?.code]).toEqual([422, 'cursor_unknown']);
  });
});

describe('staff', () => {
  const invite = (email: string) => ({ email, name: 'Cora Clinician', role: 'clinician' as const, siteId });

  it('are invited by a mail with a link whose token is kept nowhere else', async () => {
    const body = invite('cora@harrowmere.example');
    const shown = await clinic.call(admin, inviteStaff, { body, key: 'invite-cora-1' });
    expect(shown).toMatchObject({ state: 'invited', role: 'clinician', siteIds: [siteId], accountId: null });
    expect(await clinic.call(admin, inviteStaff, { body, key: 'invite-cora-1' })).toEqual(shown);
    const mails = await clinic.rows(
      { facts: z.object({ path: z.string(), siteName: z.string() }) },
      `select facts from outbox where kind = 'staff_invitation' and to_email = $1`,
      [body.email],
    );
    expect(mails).toHaveLength(1);
    const token = mails[0]?.facts.path.replace('/invitation#token=', '') ?? '';
    const kept = await clinic.rows({ token_hash: z.string() }, 'select token_hash from invitation where email = $1', [
      body.email,
    ]);
    expect(kept).toHaveLength(1);
    expect(JSON.stringify(kept)).not.toContain(token);
    const { items } = await clinic.call(admin, listStaff, { query: { siteId } });
    expect(items.map(({ name, state }) => [name, state])).toContainEqual(['Cora Clinician', 'invited']);
  });

  it('are not invited twice, nor under an address that somebody has', async () => {
    const again = await clinic.refused(admin, inviteStaff, { body: invite('cora@harrowmere.example') });
    expect(again.code).toBe('staff.address_taken');
    const person = await clinic.patient('Ines Marlow', siteId);
    const taken = await clinic.refused(admin, inviteStaff, { body: invite(person.email.toUpperCase()) });
    expect(taken.code).toBe('staff.address_taken');
  });

  it('of another site are not there', async () => {
    const body = { ...invite('dan@harrowmere.example'), siteId: otherSiteId };
    expect((await clinic.refused(admin, inviteStaff, { body })).status).toBe(404);
    expect((await clinic.refused(admin, listStaff, { query: { siteId: otherSiteId } })).status).toBe(404);
    const stranger = await clinic.staff('Otto Other', 'coordinator', otherSiteId);
    const params = { accountId: stranger.accountId };
    const refusal = await clinic.refused(admin, suspendStaff, { params, body: { suspended: true, reason: 'Left' } });
    expect(refusal.status).toBe(404);
    const { items } = await clinic.call(admin, listStaff, {});
    expect(items.map(({ name }) => name)).not.toContain('Otto Other');
  });

  it('lose every session when suspended, and come back', async () => {
    const coordinator = await clinic.staff('Cleo Coordinator', 'coordinator', siteId);
    const { accountId } = coordinator;
    await clinic.client.pool.query(
      `insert into auth_session (id, token, user_id, expires_at) values ($1, $1, $2, now() + interval '1 day')`,
      [randomUUID(), accountId],
    );
    const params = { accountId };
    const gone = await clinic.call(admin, suspendStaff, { params, body: { suspended: true, reason: 'On leave' } });
    expect(gone.state).toBe('suspended');
    const sessions = await clinic.client.pool.query('select 1 from auth_session where user_id = $1', [accountId]);
    expect(sessions.rowCount).toBe(0);
    const back = await clinic.call(admin, suspendStaff, { params, body: { suspended: false, reason: 'Back' } });
    expect(back.state).toBe('active');
  });

  it('do not suspend themselves, and a participant is no member of staff', async () => {
    const body = { suspended: true, reason: 'Why not' };
    const oneself = await clinic.refused(admin, suspendStaff, { params: { accountId: admin.accountId }, body });
    expect(oneself.code).toBe('staff.oneself');
    const person = await clinic.patient('Per Son', siteId);
    const params = { accountId: person.accountId };
    expect((await clinic.refused(admin, suspendStaff, { params, body })).status).toBe(404);
  });

  it('come a page at a time, invited and active ones in one order', async () => {
    const names: string[] = [];
    let cursor: string | null | undefined;
    do {
      const page = await clinic.call(admin, listStaff, { query: { limit: 2, ...(cursor ? { cursor } : {}) } });
      expect(page.items.length).toBeLessThanOrEqual(2);
      names.push(...page.items.map(({ name }) => name));
      cursor = page.nextCursor;
    } while (cursor);
    expect(names).toEqual([...names].sort());
    expect(new Set(names).size).toBe(names.length);
    expect(names.length).toBeGreaterThan(2);
  });
});

describe('a protocol', () => {
  const contacts = [{ name: 'On call', email: 'oncall@harrowmere.example', phone: '020 7946 0101' }];
  const settings = defaultProtocolSettings({ contacts, consentRequiredFrom: '2026-01-01T00:00:00.000Z' });
  const change = (basedOnVersion: number, limits = {}) => ({
    ...{ siteId, basedOnVersion, reason: 'Tighter', password: 'the password again' },
    settings: { ...settings, limits: { ...settings.limits, ...limits } },
  });

  it('gets its next version, which is then in force', async () => {
    const signed = await clinic.call(admin, changeProtocol, { body: change(1, { routineCurrentMilliamp: 1.5 }) });
    expect(signed).toMatchObject({ version: 2, current: true, signedBy: 'Ada Admin' });
    const current = await clinic.call(admin, listProtocols, {});
    expect(current.items.map(({ version }) => version)).toEqual([2]);
    const all = await clinic.call(admin, listProtocols, { query: { all: 'true', siteId } });
    expect(all.items.map(({ version, current: isCurrent }) => [version, isCurrent])).toEqual([
      [2, true],
      [1, false],
    ]);
  });

  it('is refused when another version came in between, also when two sign at once', async () => {
    expect((await clinic.refused(admin, changeProtocol, { body: change(1) })).code).toBe('version.stale');
    const both = await Promise.allSettled([
      clinic.call(admin, changeProtocol, { body: change(2) }),
      clinic.call(admin, changeProtocol, { body: change(2) }),
    ]);
    expect(both.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
  });

  it('never allows more than a ceiling, and names field, limit and source', async () => {
    const refusal = await clinic.refused(admin, changeProtocol, { body: change(3, { mostCurrentMilliamp: 5 }) });
    expect(refusal.code).toBe('protocol.above_ceiling');
    expect(refusal.fields).toEqual([
      expect.objectContaining({
        path: 'settings.limits.mostCurrentMilliamp',
        code: 'above_ceiling',
        facts: expect.objectContaining({ limit: 4, layer: 'ceiling' }),
      }),
    ]);
  });

  it('of another site is not there', async () => {
    const body = { ...change(1), siteId: otherSiteId };
    expect((await clinic.refused(admin, changeProtocol, { body })).status).toBe(404);
    expect((await clinic.refused(admin, listProtocols, { query: { siteId: otherSiteId } })).status).toBe(404);
  });
});
