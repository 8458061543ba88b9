// What leaves by mail: neutral words, links of our own, urgent first, at least once, and nothing stale.
import { randomUUID } from 'node:crypto';
import { insertOutbox, type OutboxRow } from '@/db/queries/house';
import { setOffset } from '@/db/queries/clock';
import { renderMail } from '@/server/mail/render-mail';
import { outboxKinds, type OutboxKind } from '@/shared/values/outbox-kinds';
import { openTestHouse, type TestHouse } from '../support/house';
import { pastTheGuards } from '../support/postgres';

let at: TestHouse;
beforeAll(async () => {
  at = await openTestHouse();
});
afterAll(() => at.close());
beforeEach(async () => {
  at.mails.length = 0;
  at.mailFault.error = null;
  await setOffset(at.house.client.db, 0);
  await pastTheGuards(at.house.client, (client) => client.query('delete from outbox'));
});

const facts = {
  name: 'Tam Marlow',
  siteName: 'Lantern Street Clinic',
  invitedBy: 'Ada Thorne',
  participantName: 'Ines',
  code: 'LS-0142',
  path: '/somewhere#token=abc',
  stopPath: '/stop-mails#token=def',
};

async function keep(key: string, more: { kind?: OutboxKind; urgent?: boolean; dueIn?: number; dropIn?: number } = {}) {
  const createdAt = await at.house.transact.now();
  const later = (seconds: number) => new Date(Date.parse(createdAt) + seconds * 1000).toISOString();
  const row = { kind: more.kind ?? 'missed_nudge', facts, toEmail: `${key}@harrowmere.example`, language: 'en', key };
  const when = {
    createdAt,
    dueAt: later(more.dueIn ?? 0),
    dropAt: more.dropIn === undefined ? null : later(more.dropIn),
  };
  await insertOutbox(at.house.client.db, [{ id: randomUUID(), urgent: more.urgent ?? false, ...row, ...when }]);
}

const kept = () => at.rows('select key, closed_why, attempts from outbox order by key');

/** Words that would tell a stranger what the mail is about (guidance R70). */
const telling =
  /stimulat|tdcs|tacs|trns|\btes\b|electr|\bmA\b|milliamp|dose|current|brain|treat|therap|medic|patient|clinical|session|diary|symptom|headache|skin|mood|pain|depress|fatigue|stroke|lockout|prescri|device|trial|study|sham|arm\b|score|illness|health/i;

describe('the words of every kind of mail', () => {
  it.each(outboxKinds)('%s says nothing of what it is about, and leaves no gap', (kind) => {
    const row: OutboxRow = {
      ...{ id: randomUUID(), kind, facts, toEmail: 'a@b.example', language: 'en', key: 'k', urgent: false },
      ...{ createdAt: '', dueAt: '', dropAt: null, attempts: 0, lastError: null, closedAt: null, closedWhy: null },
    };
    const { subject, text, html } = renderMail(row, 'https://clinic.example');
    const words = `${subject}\n${text}`.replaceAll(facts.siteName, '').replaceAll(/https:\S+/g, '');
    expect(words).not.toMatch(telling);
    expect(`${subject}${text}${html}`).not.toMatch(/\{\{|undefined|null|mail:|\.button|\.subject/);
    expect(subject.length).toBeGreaterThan(5);
    expect(text).toContain('https://clinic.example/somewhere#token=abc');
    expect(html).not.toMatch(/<img|<script|src=/);
  });

  it('make no link of a fact that leads elsewhere, and no markup of a name', () => {
    const row: OutboxRow = {
      ...{
        id: randomUUID(),
        kind: 'caregiver_missed',
        toEmail: 'a@b.example',
        language: 'en',
        key: 'k',
        urgent: false,
      },
      facts: { ...facts, name: '<b onload=x>', path: '//evil.example', stopPath: 'https://evil.example' },
      ...{ createdAt: '', dueAt: '', dropAt: null, attempts: 0, lastError: null, closedAt: null, closedWhy: null },
    };
    const { html, text } = renderMail(row, 'https://clinic.example');
    expect(html).not.toContain('evil.example');
    expect(text).not.toContain('evil.example');
    expect(html).not.toContain('<b onload');
  });
});

describe('the outbox', () => {
  it('sends what is due, urgent first, and nothing before its time', async () => {
    await keep('plain');
    await keep('page', { kind: 'page', urgent: true });
    await keep('tomorrow', { dueIn: 86_400 });
    await at.house.runner.runDue();
    expect(at.mails.map(({ key }) => key)).toEqual(['page', 'plain']);
    await at.house.runner.moveClock(86_400);
    expect(at.mails.map(({ key }) => key)).toEqual(['page', 'plain', 'tomorrow']);
  });

  it('keeps one mail for one matter, however often it is told', async () => {
    await keep('same');
    await keep('same');
    await at.house.runner.runDue();
    await keep('same');
    await at.house.runner.runDue();
    expect(at.mails).toHaveLength(1);
  });

  it('tries again after a fault until the mail is out', async () => {
    at.mailFault.error = new Error('the mail server is away');
    await keep('later');
    await at.house.runner.runDue();
    expect(await kept()).toEqual([{ key: 'later', closed_why: null, attempts: 1 }]);
    at.mailFault.error = null;
    await at.house.runner.moveClock(120);
    expect(await kept()).toEqual([{ key: 'later', closed_why: 'sent', attempts: 2 }]);
    expect(at.mails).toHaveLength(1);
  });

  it('gives up a mailbox that refuses for good', async () => {
    at.mailFault.error = Object.assign(new Error('no such mailbox'), { responseCode: 550 });
    await keep('gone');
    await at.house.runner.runDue();
    expect(await kept()).toEqual([{ key: 'gone', closed_why: 'refused', attempts: 1 }]);
  });

  it('drops a nudge that is stale and says so', async () => {
    await keep('stale', { dropIn: 60 });
    await setOffset(at.house.client.db, 61);
    await at.house.runner.runDue();
    expect(at.mails).toEqual([]);
    expect(await kept()).toEqual([{ key: 'stale', closed_why: 'dropped', attempts: 1 }]);
  });

  it('sends each mail once when two senders work side by side', async () => {
    for (let index = 0; index < 45; index += 1) await keep(`m${index}`);
    await Promise.all([at.house.runner.runDue(), at.house.runner.runDue()]);
    expect(new Set(at.mails.map(({ key }) => key)).size).toBe(45);
    expect(at.mails).toHaveLength(45);
  });
});
