// Clinical rows are added, never changed or removed: the database itself refuses, whoever asks.
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { openClinic, type Clinic, type Patient } from '../support/clinic';

let clinic: Clinic;
let person: Patient;

beforeAll(async () => {
  clinic = await openClinic();
  person = await clinic.patient('Ines Marlow', await clinic.site('LS'));
});
afterAll(() => clinic.close());

/** What of a row may change: `once` from null to a value, `grows` upwards, `free` while the row is open. */
const changeable: Record<string, string[]> = {
  ...Object.fromEntries(
    [
      ...['protocol', 'screening', 'training', 'watched_session', 'message', 'caregiver_share', 'caregiver_code'],
      ...['device_state', 'signature', 'acknowledgement', 'precheck', 'session_event', 'diary', 'photo'],
      ...['worklist_claim', 'review', 'audit_entry', 'audit_anchor', 'audit_anchor_head'],
    ].map((table) => [table, []]),
  ),
  ...Object.fromEntries(
    [
      ...['permit', 'lockout', 'consent', 'invitation', 'planned_session', 'device_assignment', 'supply', 'course'],
      ...['course_pause', 'signing_key'],
    ].map((table) => [table, ['closed_at', 'closed_why']]),
  ),
  participant: ['account_id', 'closed_at', 'closed_why'],
  caregiver: ['account_id', 'accepted_at', 'mails_stopped_at', 'closed_at', 'closed_why'],
  prescription: ['version', 'signed_at', 'closed_at', 'closed_why'],
  session: [
    ...['started_at', 'ended_at', 'end_reason', 'delivered_uc', 'upper_uc', 'on_ms', 'fraction_permille'],
    ...['completeness', 'summary', 'closed_at', 'closed_why'],
  ],
  worklist_item: ['~escalate_at', '~escalation', 'closed_at', 'closed_why'],
  device: ['+last_counter'],
  audit_head: ['+sequence', '~hash', '~previous_hash'],
};

it('guards exactly the tables of the list, each with exactly the columns of the list', async () => {
  const triggers = await clinic.rows(
    { table: z.string(), columns: z.string() },
    `select tgrelid::regclass::text as table, encode(tgargs, 'escape') as columns from pg_trigger where tgname = 'append_only' and tgenabled = 'O'`,
  );
  const found = Object.fromEntries(
    triggers.map(({ table, columns }) => [table, columns.split('\\000').filter(Boolean)]),
  );
  expect(found).toEqual(changeable);
});

it('takes the right to remove rows from the role that the server has', async () => {
  for (const table of Object.keys(changeable)) {
    await expect(clinic.client.pool.query(`delete from ${table}`)).rejects.toThrow(/permission denied/);
    await expect(clinic.client.pool.query(`truncate ${table} cascade`)).rejects.toThrow(/permission denied/);
  }
});

async function lockout(): Promise<string> {
  const id = randomUUID();
  await clinic.client.pool.query(
    `insert into lockout (id, participant_id, level, code, source, opened_at) values ($1, $2, 'safety', 'seizure', 'diary', now())`,
    [id, person.participantId],
  );
  return id;
}

it('lets a row be closed once and then not at all', async () => {
  const id = await lockout();
  const set = (what: string) => clinic.client.pool.query(`update lockout set ${what} where id = $1`, [id]);
  await expect(set(`level = 'review'`)).rejects.toThrow('column level of lockout cannot change so');
  await set(`closed_at = now(), closed_why = 'lifted'`);
  await expect(set(`closed_why = 'never was'`)).rejects.toThrow('this row of lockout is closed');
  await expect(set(`closed_at = null`)).rejects.toThrow('this row of lockout is closed');
});

it('refuses any change of a message, and a counter that goes back', async () => {
  await clinic.client.pool.query(
    `insert into message (id, participant_id, account_id, from_site, text, created_at) values ($1, $2, $3, false, 'x', now())`,
    [randomUUID(), person.participantId, person.accountId],
  );
  await expect(clinic.client.pool.query(`update message set text = 'y'`)).rejects.toThrow(
    'rows of message never change',
  );
  const device = randomUUID();
  await clinic.client.pool.query(
    `insert into device (id, site_id, label, model, serial, firmware, calibration_due_on, created_at, last_counter)
     select $1, id, 'D1', 'M', 'S1', '1', '2030-01-01', now(), 5 from site limit 1`,
    [device],
  );
  await clinic.client.pool.query('update device set last_counter = 6 where id = $1', [device]);
  await expect(clinic.client.pool.query('update device set last_counter = 5 where id = $1', [device])).rejects.toThrow(
    'column last_counter of device cannot change so',
  );
});
