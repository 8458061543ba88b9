// Reviews: what they close, who may lift what, and the signatures that they leave, on a real database.

import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { insertLockout, type LockoutLevel } from '@/db/queries/lockout';
import { openItem } from '@/db/queries/worklist';
import { listReviews } from '@/server/features/review/list-reviews';
import { recordReview } from '@/server/features/review/record-review';
import type { BodyIn } from '@/shared/contracts/contract';
import type { recordReview as contract } from '@/shared/contracts/worklist';
import { openClinic, type Clinic, type Patient } from '../support/clinic';

type Body = BodyIn<typeof contract>;

let clinic: Clinic;
let siteId: string;
let oona: AccountActor;
let quill: AccountActor;
let patient: Patient;

beforeAll(async () => {
  clinic = await openClinic();
  siteId = await clinic.site('LS');
  oona = await clinic.staff('Oona Feld', 'clinician', siteId);
  quill = await clinic.staff('M. Quill', 'coordinator', siteId);
});
beforeEach(async () => {
  patient = await clinic.patient('Tobiah Renn', siteId);
});
afterAll(() => clinic.close());

async function locked(level: LockoutLevel | null): Promise<{ itemId: string; lockoutId: string | null }> {
  const openedAt = await clinic.now();
  const lockoutId = level === null ? null : randomUUID();
  if (level !== null && lockoutId !== null) {
    const until = level === 'hold' ? new Date(Date.parse(openedAt) + 3_600_000).toISOString() : null;
    const from = { code: 'burn_or_blister', source: 'diary', sourceId: null } as const;
    await insertLockout(clinic.client.db, {
      id: lockoutId,
      participantId: patient.participantId,
      level,
      ...from,
      openedAt,
      until,
    });
  }
  const itemId = randomUUID();
  const about = { level: 'safety', why: 'burn_or_blister', facts: {}, matter: itemId } as const;
  await openItem(clinic.client.db, {
    id: itemId,
    siteId,
    participantId: patient.participantId,
    ...about,
    lockoutId,
    openedAt,
    escalateAt: openedAt,
  });
  return { itemId, lockoutId };
}

const body = (itemId: string, decision: Body['decision'], more: Partial<Body> = {}): { body: Body } => ({
  body: {
    itemId,
    decision,
    finding: 'A blister at F3, 4 mm',
    reason: 'Healed',
    password: 'checked by the door',
    ...more,
  },
});
const review = (who: AccountActor, itemId: string, decision: Body['decision'], more: Partial<Body> = {}) =>
  clinic.call(who, recordReview, body(itemId, decision, more));
const codeOf = async (who: AccountActor, itemId: string, decision: Body['decision'], more: Partial<Body> = {}) =>
  (await clinic.refused(who, recordReview, body(itemId, decision, more))).code;

async function stateOf({ itemId, lockoutId }: { itemId: string; lockoutId: string | null }) {
  const shape = { row: z.string().nullable(), escalates: z.boolean(), lockout: z.string().nullable() };
  const [state] = await clinic.rows(
    shape,
    `select i.closed_why as row, i.escalate_at is not null as escalates, (select l.closed_why from lockout l where l.id = $2) as lockout
     from worklist_item i where i.id = $1`,
    [itemId, lockoutId],
  );
  return state;
}

const grading = { severity: 'moderate', serious: false, causality: 'probable', expected: true } as const;

describe('a review', () => {
  it('that lifts closes the lockout and the row', async () => {
    const matter = await locked('safety');
    expect(await review(oona, matter.itemId, 'lift')).toMatchObject({ itemClosed: true, lockoutClosed: true });
    expect(await stateOf(matter)).toEqual({ row: 'lift', escalates: false, lockout: 'lifted' });
  });

  it('that lifts one lockout leaves the person’s other lockouts as they are', async () => {
    const [one, other] = [await locked('safety'), await locked('review')];
    await review(oona, one.itemId, 'lift');
    expect(await stateOf(other)).toEqual({ row: null, escalates: true, lockout: null });
  });

  it('by a coordinator lifts a device hold and nothing worse', async () => {
    const [device, safety] = [await locked('device'), await locked('safety')];
    expect(await review(quill, device.itemId, 'lift')).toMatchObject({ lockoutClosed: true });
    expect(await codeOf(quill, safety.itemId, 'lift')).toBe('review.clinician_decides');
    expect(await stateOf(safety)).toEqual({ row: null, escalates: true, lockout: null });
  });

  it('that keeps leaves both, and acknowledges the page', async () => {
    const matter = await locked('review');
    expect(await review(oona, matter.itemId, 'keep')).toMatchObject({ itemClosed: false, lockoutClosed: false });
    expect(await stateOf(matter)).toEqual({ row: null, escalates: false, lockout: null });
  });

  it('does not take a row off while its lockout is open, and does once it is not', async () => {
    const [held, free] = [await locked('review'), await locked(null)];
    expect(await codeOf(oona, held.itemId, 'noted')).toBe('review.lockout_open');
    expect(await codeOf(oona, free.itemId, 'lift')).toBe('review.nothing_to_lift');
    expect(await review(quill, free.itemId, 'done')).toMatchObject({ itemClosed: true, lockoutClosed: false });
    expect(await codeOf(oona, free.itemId, 'noted')).toBe('worklist.closed');
  });

  it('lifts no hold that ends by time, and takes its row off once it has ended', async () => {
    const hold = await locked('hold');
    expect(await codeOf(oona, hold.itemId, 'lift')).toBe('review.nothing_to_lift');
    expect(await codeOf(oona, hold.itemId, 'noted')).toBe('review.lockout_open');
    await clinic.advance(3_600);
    expect(await review(oona, hold.itemId, 'noted')).toMatchObject({ itemClosed: true, lockoutClosed: false });
  });

  it('is signed as reviewed, and as graded where an event was graded, over one content', async () => {
    const matter = await locked('safety');
    const { id } = await review(oona, matter.itemId, 'lift', { grading });
    const shape = { meaning: z.string(), name: z.string(), same: z.boolean() };
    const signatures = await clinic.rows(
      shape,
      `select s.meaning, s.name, s.content_hash = r.content_hash as same from signature s join review r on r.id = s.subject_id where r.id = $1 order by s.meaning`,
      [id],
    );
    expect(signatures).toEqual([
      { meaning: 'graded', name: 'Oona Feld', same: true },
      { meaning: 'reviewed', name: 'Oona Feld', same: true },
    ]);
  });

  it('is graded by a clinician alone', async () => {
    const matter = await locked(null);
    expect(await codeOf(quill, matter.itemId, 'noted', { grading })).toBe('review.clinician_decides');
  });

  it('is not there for another site, and leaves nothing behind when refused', async () => {
    const matter = await locked('safety');
    const stranger = await clinic.staff('Odd Man', 'clinician', await clinic.site('MR'));
    expect((await clinic.refused(stranger, recordReview, body(matter.itemId, 'lift'))).status).toBe(404);
    expect((await clinic.refused(oona, recordReview, body(randomUUID(), 'lift'))).status).toBe(404);
    expect(
      await clinic.rows({ n: z.number() }, 'select count(*)::int n from review where item_id = $1', [matter.itemId]),
    ).toEqual([{ n: 0 }]);
  });

  it('by two at the same time lifts once', async () => {
    const matter = await locked('safety');
    const outcomes = await Promise.allSettled([
      review(oona, matter.itemId, 'lift'),
      review(oona, matter.itemId, 'lift'),
    ]);
    expect(outcomes.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
  });
});

describe('the list of reviews', () => {
  it('is newest first, a page at a time, and keeps people’s own words from a monitor', async () => {
    for (const finding of ['one', 'two', 'three']) {
      const { itemId } = await locked(null);
      await review(oona, itemId, 'noted', { finding, grading });
      await clinic.advance(1);
    }
    const params = { participantId: patient.participantId };
    const first = await clinic.call(quill, listReviews, { params, query: { limit: 2 } });
    const second = await clinic.call(quill, listReviews, {
      params,
      query: { limit: 2, cursor: first.nextCursor ?? '' },
    });
    expect([...first.items, ...second.items].map(({ finding }) => finding)).toEqual(['three', 'two', 'one']);
    expect(first.items[0]).toMatchObject({ by: 'Oona Feld', why: 'burn_or_blister', decision: 'noted', grading });
    const monitor = await clinic.staff('Monitor', 'monitor', siteId);
    const seen = await clinic.call(monitor, listReviews, { params, query: {} });
    expect(seen.items.map(({ finding, reason, grading: graded }) => [finding, reason, graded?.severity])).toEqual(
      Array.from({ length: 3 }, () => ['', '', 'moderate']),
    );
  });
});
