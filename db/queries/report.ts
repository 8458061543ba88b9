// Numbers over a site or a person, all counted by the database, and the sessions as flat rows for analysis. Judges nothing; a person stands
// here by code alone.

import { and, asc, inArray, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { participant } from '@/db/schema/participant';
import { feltRows } from './participant';

export interface PlannedCounts {
  complete: number;
  partial: number;
  notDelivered: number;
  missed: number;
}

/**
 * Planned sessions of `people` with what became of each, as the strip and adherence count them: a session that began stands for the planned
 * one, and what was moved or cancelled leaves the count unless something was delivered in it. One pass, whatever the number of people.
 */
const statesOfPeople = sql.raw(`
  of_planned as (
    select distinct on (s.planned_session_id) s.planned_session_id, s.closed_at, s.completeness
    from session s join people on people.id = s.participant_id
    where s.started_at is not null and s.closed_why is distinct from 'unused'
    order by s.planned_session_id, s.started_at desc),
  states as (
    select c.participant_id, case
      when s.closed_at is not null then coalesce(s.completeness, 'not_delivered')
      when s.planned_session_id is not null or p.closed_why is null then 'future'
      when p.closed_why in ('missed', 'excused', 'cancelled', 'moved') then p.closed_why
      else 'not_delivered' end as state
    from people
    join course c on c.participant_id = people.id
    join planned_session p on p.course_id = c.id
    left join of_planned s on s.planned_session_id = p.id)`);

const countsOf = sql.raw(`
  count(*) filter (where x.state = 'complete')::int as complete,
  count(*) filter (where x.state = 'partial')::int as partial,
  count(*) filter (where x.state = 'not_delivered')::int as not_delivered,
  count(*) filter (where x.state = 'missed')::int as missed`);

const isLockedNow = (now: string) => sql`l.closed_at is null and (l.until is null or l.until > ${now}::timestamptz)`;

/** Sites as one parameter. */
const listed = (siteIds: readonly string[]) => sql`any(${`{${siteIds.join(',')}}`}::uuid[])`;

export interface ReportRecord extends PlannedCounts {
  participantId: string;
  code: string;
  worstEffect: number | null;
  openLockouts: number;
}

/** A page of people by code with their counts. */
export async function listReportRows(
  db: Db,
  siteIds: readonly string[],
  now: string,
  page: { limit: number; after: { code: string; id: string } | null },
): Promise<ReportRecord[]> {
  if (siteIds.length === 0) return [];
  const people = db
    .select({ id: participant.id, code: participant.code })
    .from(participant)
    .where(
      and(
        inArray(participant.siteId, [...siteIds]),
        page.after
          ? sql`(${participant.code}, ${participant.id}) > (${page.after.code}, ${page.after.id}::uuid)`
          : undefined,
      ),
    )
    .orderBy(asc(participant.code), asc(participant.id))
    .limit(page.limit);
  const { rows } = await db.execute<{
    id: string;
    code: string;
    complete: number;
    partial: number;
    not_delivered: number;
    missed: number;
    worst_effect: number | null;
    open_lockouts: number;
  }>(sql`
    with people as (${people}), ${statesOfPeople}
    select people.id, people.code, ${countsOf},
      (select max(d.worst_strength)::int from diary d where d.participant_id = people.id) as worst_effect,
      (select count(*)::int from lockout l where l.participant_id = people.id and ${isLockedNow(now)}) as open_lockouts
    from people left join states x on x.participant_id = people.id
    group by people.id, people.code order by people.code, people.id`);
  return rows.map((row) => ({
    participantId: row.id,
    code: row.code,
    complete: row.complete,
    partial: row.partial,
    notDelivered: row.not_delivered,
    missed: row.missed,
    worstEffect: row.worst_effect,
    openLockouts: row.open_lockouts,
  }));
}

export interface ReportTotals extends PlannedCounts {
  participants: number;
  openLockouts: number;
}

export async function readReportTotals(db: Db, siteIds: readonly string[], now: string): Promise<ReportTotals> {
  const { rows } = await db.execute<{
    complete: number;
    partial: number;
    not_delivered: number;
    missed: number;
    participants: number;
    open_lockouts: number;
  }>(sql`
    with people as (select id from participant where site_id = ${listed(siteIds)}), ${statesOfPeople}
    select ${countsOf},
      (select count(*)::int from people) as participants,
      (select count(*)::int from lockout l join people on people.id = l.participant_id where ${isLockedNow(now)}) as open_lockouts
    from states x`);
  const [row] = rows;
  if (!row) throw new Error('a sum over nothing is still a row');
  const { not_delivered: notDelivered, open_lockouts: openLockouts, complete, partial, missed, participants } = row;
  return { complete, partial, notDelivered, missed, participants, openLockouts };
}

export interface EffectCount {
  kind: string;
  sessions: number;
  ofSessions: number;
}

/** In how many sessions with a diary each effect was felt at all, the most frequent first. */
export async function listEffectCounts(db: Db, siteIds: readonly string[]): Promise<EffectCount[]> {
  const { rows } = await db.execute<{ kind: string; sessions: number; of_sessions: number }>(sql`
    with d as (
      select d.session_id, d.answers from diary d join participant p on p.id = d.participant_id
      where d.kind = 'after' and p.site_id = ${listed(siteIds)})
    select felt.kind, count(*)::int as sessions, (select count(*)::int from d) as of_sessions
    from d cross join ${feltRows}
    group by felt.kind order by sessions desc, felt.kind`);
  return rows.map((row) => ({ kind: row.kind, sessions: row.sessions, ofSessions: row.of_sessions }));
}

/** One session, flat. Amounts in the units of people. */
export interface SessionRow {
  site: string;
  participant: string;
  session: string;
  number: number;
  window_from: string;
  started_at: string;
  ended_at: string | null;
  end_reason: string | null;
  prescription_version: number | null;
  waveform: string;
  intensity_mA: number;
  planned_min: number;
  planned_C: number;
  delivered_min: number | null;
  delivered_C: number | null;
  delivered_upper_C: number | null;
  fraction: number | null;
  completeness: string | null;
  headache_after: number | null;
  headache_next_day: number | null;
  worst_effect: number | null;
  effects: string | null;
  skin: string | null;
  diary_at: string | null;
}

const iso = (column: string) => `to_char(${column} at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`;

/**
 * Sessions of these sites that began, a slice at a time by person and start. `number` is the place in the course's strip; effects read
 * `tingling 3; headache 2`. What a person wrote in own words is left out.
 */
export async function listSessionRows(
  db: Db,
  siteIds: readonly string[],
  slice: { limit: number; after: SessionRow | null },
): Promise<SessionRow[]> {
  if (siteIds.length === 0) return [];
  const { after } = slice;
  const isAfter = after
    ? sql`(who.code, s.started_at, s.id) > (${after.participant}, ${after.started_at}::timestamptz, ${after.session}::uuid)`
    : sql`true`;
  const columns = sql.raw(`
    site.code as site, who.code as participant, s.id as session,
    (select count(*)::int from planned_session q where q.course_id = s.course_id
      and (q.closed_why is null or q.closed_why in ('done', 'missed', 'excused')
        or exists (select 1 from session b where b.course_id = q.course_id and b.planned_session_id = q.id
          and b.started_at is not null and b.closed_why is distinct from 'unused'))
      and (q.window_from, q.created_at, q.id) <= (p.window_from, p.created_at, p.id)) as number,
    ${iso('p.window_from')} as window_from, ${iso('s.started_at')} as started_at, ${iso('s.ended_at')} as ended_at,
    s.end_reason, given.version as prescription_version, given.waveform,
    given.intensity_ua / 1000.0::float8 as "intensity_mA", given.on_ms / 60000.0::float8 as planned_min,
    given.charge_uc / 1000000.0::float8 as "planned_C", s.on_ms / 60000.0::float8 as delivered_min,
    s.delivered_uc / 1000000.0::float8 as "delivered_C", s.upper_uc / 1000000.0::float8 as "delivered_upper_C",
    s.fraction_permille / 1000.0::float8 as fraction, s.completeness,
    (d.answers ->> 'headacheAfter')::int as headache_after, (n.answers ->> 'headacheNextDay')::int as headache_next_day,
    d.worst_strength as worst_effect, d.answers ->> 'skin' as skin, ${iso('d.written_at')} as diary_at,
    (select string_agg(concat(f ->> 'kind', ' ', f ->> 'strength'), '; ') from jsonb_array_elements(d.answers -> 'effects') f) as effects`);
  const { rows } = await db.execute<SessionRow & Record<string, unknown>>(sql`
    select ${columns}
    from session s
    join participant who on who.id = s.participant_id
    join site on site.id = who.site_id
    join permit on permit.id = s.permit_id
    join prescription given on given.id = permit.prescription_id
    join planned_session p on p.id = s.planned_session_id
    left join diary d on d.session_id = s.id and d.kind = 'after'
    left join diary n on n.session_id = s.id and n.kind = 'next_day'
    where who.site_id = ${listed(siteIds)} and s.started_at is not null and s.closed_why is distinct from 'unused'
      and ${isAfter}
    order by who.code, s.started_at, s.id
    limit ${slice.limit}`);
  return rows;
}
