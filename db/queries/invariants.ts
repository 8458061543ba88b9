// What must be true of the database at every moment, asked in SQL: how many things were looked at, and which of them break it. Reads only;
// what needs the rules is asked by server/house/check-invariants.ts.

import { sql, type SQL } from 'drizzle-orm';
import type { Db } from '@/db/client';

export interface Counted {
  checked: number;
  broken: string[];
}

/** Told at most so many; the count of all stands beside them. */
const toldMost = 20;

/** @param of one row a thing: `id`, and `ok`; null counts as broken */
async function counted(db: Db, of: SQL): Promise<Counted> {
  const { rows } = await db.execute<{ checked: number; broken: string[] | null }>(
    sql`select count(*)::int as checked, (array_agg(id::text) filter (where ok is not true))[1:${sql.raw(String(toldMost))}] as broken from (${of}) as things`,
  );
  const [row] = rows;
  return { checked: row?.checked ?? 0, broken: row?.broken ?? [] };
}

/** I1 */
export function oneLivePermit(db: Db): Promise<Counted> {
  return counted(
    db,
    sql`select participant_id as id, count(*) filter (where closed_at is null) <= 1 as ok from permit group by participant_id`,
  );
}

export interface Windows {
  dayMicrocoulomb: number;
  weekMicrocoulomb: number;
}

/**
 * I2: at each start, what ended within the window before it, and its own dose on top. Reserved doses count whole; a permit that was voided
 * before anything began counts nothing.
 */
export function chargeWithinWindows(db: Db, { dayMicrocoulomb, weekMicrocoulomb }: Windows): Promise<Counted> {
  return counted(
    db,
    sql`with dose as (
      select s.id, s.participant_id, coalesce(s.started_at, p.issued_at) as began, coalesce(s.ended_at, s.created_at) as ended,
        case when s.closed_at is null then p.charge_uc else coalesce(s.upper_uc, 0) end as uc
      from session s join permit p on p.id = s.permit_id
      where s.started_at is not null or s.closed_at is not null or p.closed_at is null or p.closed_why in ('used', 'expired'))
    select d.id,
      d.uc + coalesce(sum(e.uc) filter (where e.ended > d.began - interval '24 hours'), 0) <= ${dayMicrocoulomb}::bigint
        and d.uc + coalesce(sum(e.uc), 0) <= ${weekMicrocoulomb}::bigint as ok
    from dose d left join dose e on e.participant_id = d.participant_id and e.id <> d.id
      and e.ended > d.began - interval '168 hours' and e.ended <= d.began
    group by d.id, d.uc`,
  );
}

/** I3: no event's id in two sessions, and a record that counts as whole has every number up to its end. */
export async function eventsOnceAndWhole(db: Db): Promise<Counted> {
  const once = await counted(db, sql`select id, count(distinct session_id) = 1 as ok from session_event group by id`);
  const whole = await counted(
    db,
    sql`select s.id, count(e.id) = max(e.sequence) + 1 and bool_or(e.kind = 'ended' and (e.body ->> 'lastSequence')::int + 1 = n.events) as ok
      from session s join session_event e on e.session_id = s.id
      join lateral (select count(*) as events from session_event o where o.session_id = s.id) n on true
      where s.closed_why = 'recorded' and s.summary is not null group by s.id`,
  );
  return { checked: once.checked + whole.checked, broken: [...once.broken, ...whole.broken] };
}

/**
 * I5: each permit ever issued, by the facts as they stood at its issue. Rows are only ever added and closed, so what stood then can be told
 * now: made before, and not closed yet.
 */
export function permitsByTheFacts(db: Db): Promise<Counted> {
  const stood = (made: string, closed: string) =>
    sql.raw(`${made} <= p.issued_at and (${closed} is null or ${closed} >= p.issued_at)`);
  return counted(
    db,
    sql`select p.id,
      exists (select from prescription r where r.id = p.prescription_id and ${stood('r.signed_at', 'r.closed_at')} and r.expires_at > p.issued_at
        and (r.intensity_ua, r.charge_uc, r.on_ms) = (p.intensity_ua, p.charge_uc, p.on_ms)
        and (select count(distinct g.account_id) from signature g where g.subject_id = r.id and g.content_hash = r.content_hash
          and g.created_at <= p.issued_at) >= case r.tier when 'accept' then 1 else 2 end)
      and exists (select from acknowledgement k where k.prescription_id = p.prescription_id and k.created_at <= p.issued_at)
      and exists (select from precheck c where c.id = p.precheck_id and c.participant_id = p.participant_id and c.complete
        and c.outcome = 'go_on' and c.answered_at between p.issued_at - interval '30 minutes' and p.issued_at)
      and exists (select from participant a where a.id = p.participant_id and ${stood('a.created_at', 'a.closed_at')})
      and exists (select from course c where c.id = p.course_id and ${stood('c.created_at', 'c.closed_at')})
      and not exists (select from course_pause u where u.course_id = p.course_id and u.created_at < p.issued_at
        and (u.closed_at is null or u.closed_at > p.issued_at))
      and not exists (select from lockout l where l.participant_id = p.participant_id and l.opened_at < p.issued_at
        and (l.closed_at is null or l.closed_at > p.issued_at) and (l.until is null or l.until > p.issued_at))
      and exists (select from consent c where c.participant_id = p.participant_id and c.kind = 'own' and ${stood('c.created_at', 'c.closed_at')})
      and (select n.outcome = 'clear' and n.valid_until > p.issued_at from screening n
        where n.participant_id = p.participant_id and n.created_at <= p.issued_at order by n.created_at desc, n.id desc limit 1)
      and (select n.signed_off and (n.valid_until is null or n.valid_until > p.issued_at) from training n
        where n.participant_id = p.participant_id and n.created_at <= p.issued_at order by n.created_at desc, n.id desc limit 1)
      and exists (select from device_assignment d where d.device_id = p.device_id and d.participant_id = p.participant_id
        and ${stood('d.created_at', 'd.closed_at')})
      and not exists (select from session s join prescription r on r.id = p.prescription_id where s.participant_id = p.participant_id
        and s.permit_id <> p.id and s.started_at < p.issued_at and s.closed_why is distinct from 'unused'
        and s.ended_at + make_interval(secs => r.min_gap_ms / 1000.0) > p.issued_at)
      as ok from permit p`,
  );
}

/** I6, the second half: as many entries as the heads say were written. */
export function entriesAsWritten(db: Db): Promise<Counted> {
  return counted(
    db,
    sql`select h.chain as id, h.sequence = (select count(*) from audit_entry e where e.chain = h.chain) as ok from audit_head h`,
  );
}

/** I7: a page for each row that a red flag opened, in the same transaction; one more each time that nobody answered; none waits too long. */
export async function pagesForRedFlags(db: Db, now: string): Promise<Counted> {
  const first = await counted(
    db,
    sql`select d.id, exists (select from lockout l join worklist_item i on i.lockout_id = l.id
        join outbox o on o.key = 'page:' || i.id || ':0' and o.created_at = i.opened_at
        where l.participant_id = d.participant_id and l.level = 'safety' and l.opened_at <= d.written_at
        and (l.closed_at is null or l.closed_at >= d.written_at)) as ok
      from diary d where d.emergency_advice`,
  );
  const later = await counted(
    db,
    sql`select i.id, (i.escalate_at is null or i.closed_at is not null or i.escalate_at > ${now}::timestamptz - interval '5 minutes')
        and (select count(*) from generate_series(0, i.escalation) step where not exists (
          select from outbox o where o.key = 'page:' || i.id || ':' || step)) = 0 as ok
      from worklist_item i where i.escalate_at is not null or i.escalation > 0`,
  );
  return { checked: first.checked + later.checked, broken: [...first.broken, ...later.broken] };
}

/** Whose rows the trail names as written, by the kind of their entries. */
const writtenKinds = [
  ...[
    'consent',
    'screening',
    'training',
    'watched_session',
    'prescription',
    'precheck',
    'permit',
    'session',
    'diary',
    'photo',
  ],
  ...['review', 'message', 'caregiver', 'lockout', 'planned_session', 'supply', 'device', 'protocol'],
];

/** I8: what the trail says was written is there; and the triggers that keep it there are on. */
export async function nothingDisappeared(db: Db): Promise<Counted> {
  const found: Counted = await counted(
    db,
    sql`select tgrelid::regclass::text || '.' || tgname as id, tgenabled = 'O' as ok from pg_trigger where not tgisinternal`,
  );
  for (const kind of writtenKinds) {
    const table = sql.raw(`"${kind}"`);
    const of = await counted(
      db,
      sql`select distinct e.subject_id as id, exists (select from ${table} t where t.id::text = e.subject_id) as ok
        from audit_entry e where e.kind = 'write' and e.subject_kind = ${kind}`,
    );
    found.checked += of.checked;
    found.broken.push(...of.broken.map((id) => `${kind} ${id}`));
  }
  return found;
}

/** I10: one wish, one permit, one answer. */
export async function oneAnswerAKey(db: Db): Promise<Counted> {
  const permits = await counted(
    db,
    sql`select participant_id || ' ' || key as id, count(*) = 1 as ok from permit group by participant_id, key`,
  );
  const answers = await counted(
    db,
    sql`select account_id || ' ' || key as id, count(*) = 1 and bool_and(body_hash <> '') as ok from key_seen group by account_id, key`,
  );
  return { checked: permits.checked + answers.checked, broken: [...permits.broken, ...answers.broken] };
}

/** I12: a planned session is open, or ended in exactly one way; done where something was delivered in it, missed where nothing was. */
export function eachPlannedSessionEndsOnce(db: Db, now: string): Promise<Counted> {
  return counted(
    db,
    sql`select n.id, case
        when n.closed_why = 'done' then d.delivered >= 1
        when n.closed_why = 'missed' then d.delivered = 0
        when n.closed_why in ('excused', 'cancelled', 'moved') then true
        else n.closed_at is null and (n.window_to > ${now}::timestamptz - interval '15 minutes' or d.running > 0) end as ok
      from planned_session n join lateral (
        select count(*) filter (where s.closed_why = 'recorded' and s.completeness in ('complete', 'partial')) as delivered,
          count(*) filter (where s.closed_at is null and s.started_at is not null) as running
        from session s where s.planned_session_id = n.id) d on true`,
  );
}

/** S11: each signed row has a signature on its bytes, given with the password within 5 minutes. */
export function signedWithThePassword(db: Db): Promise<Counted> {
  return counted(
    db,
    sql`select w.id, exists (select from signature g where g.subject_id = w.id and g.subject_kind = w.kind and g.content_hash = w.content_hash
        and g.confirmed_at between g.created_at - interval '5 minutes' and g.created_at) as ok
      from (select 'prescription' as kind, id, content_hash from prescription where signed_at is not null
        union all select 'review', id, content_hash from review) w`,
  );
}

/** Sessions with a whole record, a page after the given id. */
export async function pageOfRecordedSessions(
  db: Db,
  after: string | null,
  limit: number,
): Promise<
  { id: string; deliveredUc: number | null; upperUc: number | null; onMs: number | null; permitOnMs: number }[]
> {
  const { rows } = await db.execute<{
    id: string;
    delivered_uc: string | null;
    upper_uc: string | null;
    on_ms: number | null;
    permit_on_ms: number;
  }>(sql`select s.id, s.delivered_uc, s.upper_uc, s.on_ms, p.on_ms as permit_on_ms from session s join permit p on p.id = s.permit_id
    where s.closed_why = 'recorded' and exists (select from session_event e where e.session_id = s.id)
      and (${after}::uuid is null or s.id > ${after}::uuid) order by s.id limit ${limit}`);
  const whole = (amount: string | null) => (amount === null ? null : Number(amount));
  return rows.map((row) => ({
    id: row.id,
    deliveredUc: whole(row.delivered_uc),
    upperUc: whole(row.upper_uc),
    onMs: row.on_ms,
    permitOnMs: row.permit_on_ms,
  }));
}
