// Messages between a person and the site, and what tells the other side.

import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { listMessages } from '@/server/features/message/list-messages';
import { sendMessage } from '@/server/features/message/send-message';
import { readParticipant } from '@/server/features/participant/read-participant';
import { openClinic, type Clinic, type Patient } from '../support/clinic';

let clinic: Clinic;
let siteId: string;
let clinician: AccountActor;
let stranger: AccountActor;
let patient: Patient;

beforeAll(async () => {
  clinic = await openClinic();
  siteId = await clinic.site('LS');
  clinician = await clinic.staff('Cora Clinician', 'clinician', siteId);
  stranger = await clinic.staff('Otto Other', 'clinician', await clinic.site('MR'));
});
beforeEach(async () => {
  patient = await clinic.patient('Ines Marlow', siteId);
});
afterAll(() => clinic.close());

const say = (who: AccountActor, text: string, key?: string) => {
  const named = who.role === 'participant' ? {} : { participantId: patient.participantId };
  return clinic.call(who, sendMessage, { body: { text, ...named }, key });
};
const waiting = () =>
  clinic.rows(
    { level: z.string(), facts: z.object({ count: z.number() }) },
    `select level, facts from worklist_item where participant_id = $1 and matter = 'message' and closed_at is null`,
    [patient.participantId],
  );
const unread = async () =>
  (await clinic.call(clinician, readParticipant, { params: { participantId: patient.participantId } })).unreadMessages;

it('keeps one thread that both sides read, newest first, page by page', async () => {
  await say(patient, 'First');
  await clinic.advance(1);
  await say(clinician, 'Second');
  await clinic.advance(1);
  await say(patient, 'Third');
  const own = await clinic.call(patient, listMessages, { query: { limit: 2 } });
  expect(own.items.map(({ text, from }) => [text, from.isSite, from.isMe])).toEqual([
    ['Third', false, true],
    ['Second', true, false],
  ]);
  const rest = await clinic.call(patient, listMessages, { query: { limit: 2, cursor: own.nextCursor ?? '' } });
  expect(rest.items.map(({ text }) => text)).toEqual(['First']);
  const query = { participantId: patient.participantId };
  const theirs = await clinic.call(clinician, listMessages, { query });
  expect(theirs.items.map(({ text, from }) => [text, from.isMe])).toEqual([
    ['Third', false],
    ['Second', true],
    ['First', false],
  ]);
});

it('stores a message once for one key', async () => {
  const first = await say(patient, 'Once', 'message-once-1');
  expect(await say(patient, 'Once', 'message-once-1')).toEqual(first);
  expect((await clinic.call(patient, listMessages, {})).items).toHaveLength(1);
});

it('opens one row of the worklist for the first, which a reply does not close', async () => {
  await say(patient, 'First');
  await say(patient, 'Second');
  expect(await waiting()).toEqual([{ level: 'look', facts: { count: 1 } }]);
  expect(await unread()).toBe(2);
  await clinic.advance(1);
  await say(clinician, 'Answer');
  expect(await waiting()).toHaveLength(1);
  expect(await unread()).toBe(0);
});

it('tells the other side by a mail that says no more than that there is something to read', async () => {
  const mails = (email: string) =>
    clinic.rows(
      { facts: z.record(z.string(), z.string()) },
      `select facts from outbox where kind = 'message_waiting' and to_email = $1`,
      [email],
    );
  const before = await mails('oncall@harrowmere.example');
  await say(patient, 'My head aches after 2 mA');
  const site = await mails('oncall@harrowmere.example');
  expect(site).toHaveLength(before.length + 1);
  expect(site.at(-1)?.facts).toEqual({ name: 'On call', path: `/participants/${patient.participantId}/messages` });
  await say(clinician, 'Please stop for today');
  expect(await mails(patient.email)).toEqual([{ facts: { name: 'Ines Marlow', path: '/messages' } }]);
});

it('asks staff whose thread they mean, and shows nobody a thread that is not theirs', async () => {
  const bare = await clinic.refused(clinician, listMessages, {});
  expect([bare.status, bare.fields?.[0]?.path]).toEqual([422, 'participantId']);
  const body = { text: 'Hello', participantId: patient.participantId };
  const query = { participantId: patient.participantId };
  const other = await clinic.patient('Ole Other', siteId);
  for (const who of [stranger, other]) {
    expect((await clinic.refused(who, sendMessage, { body })).status).toBe(404);
    expect((await clinic.refused(who, listMessages, { query })).status).toBe(404);
  }
});

it('keeps the text out of the audit trail', async () => {
  await say(patient, 'A very private sentence');
  const rows = await clinic.rows({ after: z.unknown() }, 'select after from audit_entry where participant_id = $1', [
    patient.participantId,
  ]);
  expect(rows.length).toBeGreaterThan(0);
  expect(JSON.stringify(rows)).not.toContain('private sentence');
});
