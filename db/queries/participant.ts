// Participants: enrolled, listed, withdrawn. Append-only but for the account that accepts, once, and the closing at withdrawal.

import { and, asc, desc, eq, gt, inArray, isNull, or, sql, type SQL } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { participant } from '@/db/schema/participant';
import { diary, lockout, permit, session, worklistItem } from '@/db/schema/session';
import { site, siteCounter } from '@/db/schema/site';
import type { ParticipantRecord } from './reach';

/** The next running number of a site. Holds the site's counter until the transaction ends, so numbers follow each other. */
export async function takeNumber(db: Db, siteId: string): Promise<number> {
  const [row] = await db
    .insert(siteCounter)
    .values({ siteId, lastNumber: 1 })
    .onConflictDoUpdate({ target: siteCounter.siteId, set: { lastNumber: sql`${siteCounter.lastNumber} + 1` } })
    .returning({ number: siteCounter.lastNumber });
  if (!row) throw new Error('the counter of the site gave no number');
  return row.number;
}

export type NewParticipant = Omit<ParticipantRecord, 'accountId' | 'closedAt' | 'closedWhy'>;

export async function insertParticipant(db: Db, row: NewParticipant): Promise<void> {
  await db.insert(participant).values(row);
}

/** Closes a person's record, once: withdrawn. */
export async function closeParticipant(db: Db, participantId: string, at: string): Promise<void> {
  await db
    .update(participant)
    .set({ closedAt: at, closedWhy: 'withdrawn' })
    .where(and(eq(participant.id, participantId), isNull(participant.closedAt)));
}

export interface ListedParticipant {
  id: string;
  code: string;
  name: string;
  siteId: string;
  siteName: string;
  createdAt: string;
}

export type ParticipantSort = 'name' | 'code' | 'since';

/** States as the list can be asked for; what each needs at least stands in `needs`. */
export type AskedState = 'invited' | 'training' | 'ready' | 'too_early' | 'held' | 'paused' | 'finished' | 'withdrawn';

// Plain names: a correlated subquery must say whose id it means.
const exists = (from: string) => sql.raw(`exists (select 1 from ${from})`);
const hasOpenCourse = exists('course c where c.participant_id = participant.id and c.closed_at is null');
const hasCourse = exists('course c where c.participant_id = participant.id');
const hasFinishedCourse = exists(`course c where c.participant_id = participant.id and c.closed_why = 'finished'`);
const isAcknowledged = exists(
  `prescription p join acknowledgement a on a.prescription_id = p.id
   where p.participant_id = participant.id and p.signed_at is not null and p.closed_at is null`,
);
const hasDevice = exists('device_assignment d where d.participant_id = participant.id and d.closed_at is null');
const isPaused = exists(
  'course_pause u join course c on c.id = u.course_id where c.participant_id = participant.id and u.closed_at is null',
);

/** What must be so of everybody in a state, so that few are judged; whether they are in it is the rule's answer. */
function needsOf(state: AskedState, now: string): SQL | undefined {
  const isHere = isNull(participant.closedAt);
  const isJoined = sql`${participant.accountId} is not null`;
  const isHeld = sql`exists (select 1 from ${lockout} l where l.participant_id = "participant"."id" and l.closed_at is null
    and (l.until is null or l.until > ${now}::timestamptz))`;
  const hasWindowLeft = sql`exists (select 1 from course c join planned_session p on p.course_id = c.id
    where c.participant_id = "participant"."id" and c.closed_at is null and p.closed_at is null and p.window_to > ${now}::timestamptz)`;
  const hasOpenWindow = sql`exists (select 1 from course c join planned_session p on p.course_id = c.id
    where c.participant_id = "participant"."id" and c.closed_at is null and p.closed_at is null
      and p.window_from <= ${now}::timestamptz and p.window_to > ${now}::timestamptz)`;
  const isEquipped = and(isJoined, hasOpenCourse, isAcknowledged, hasDevice, sql`not ${isPaused}`);
  switch (state) {
    case 'withdrawn':
      return or(sql`${participant.closedAt} is not null`, hasCourse);
    case 'invited':
      return and(isHere, isNull(participant.accountId));
    case 'held':
      return and(isHere, isHeld);
    case 'paused':
      return and(isHere, isJoined, isPaused);
    case 'finished':
      return and(isHere, or(hasFinishedCourse, and(hasOpenCourse, sql`not ${hasWindowLeft}`)));
    case 'too_early':
      return and(isHere, isEquipped, sql`not ${isHeld}`);
    case 'ready':
      return and(isHere, isEquipped, sql`not ${isHeld}`, hasOpenWindow);
    case 'training':
      return and(isHere, isJoined);
  }
}

/** `%` and `_` that somebody typed mean themselves. */
function literally(text: string): string {
  return text.replace(/[\\%_]/g, (sign) => `\\${sign}`);
}

/** Beginning of any word of the name, or of the code; by the code alone for those who do not see names. */
function matches(search: string, byName: boolean): SQL | undefined {
  const typed = literally(search.toLowerCase());
  const byCode = sql`lower(${participant.code}) like ${`${typed}%`}`;
  if (!byName) return byCode;
  const name = sql`lower(${participant.name})`;
  return or(byCode, sql`${name} like ${`${typed}%`}`, sql`${name} like ${`% ${typed}%`}`);
}

/** The sort key as it stands in the cursor, beside the id. */
const sortKeys = {
  name: sql<string>`lower(${participant.name})`,
  code: sql<string>`${participant.code}`,
  since: sql<string>`to_char(${participant.createdAt} at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`,
} as const;

export interface ParticipantWanted {
  siteIds: readonly string[];
  search: string | undefined;
  /** False for pseudonymous readers: nothing about a name may be learnt by asking. */
  byName: boolean;
  state: AskedState | undefined;
  sort: ParticipantSort;
  limit: number;
  after: { key: string; id: string } | null;
}

/** One page of people, candidates for `state` only: each still has to be judged. */
export async function listParticipants(
  db: Db,
  want: ParticipantWanted,
  now: string,
): Promise<(ListedParticipant & { key: string })[]> {
  if (want.siteIds.length === 0) return [];
  const key = sortKeys[want.sort];
  const after = want.after && sql`(${key}, ${participant.id}) > (${want.after.key}, ${want.after.id}::uuid)`;
  return db
    .select({
      id: participant.id,
      code: participant.code,
      name: participant.name,
      siteId: participant.siteId,
      siteName: site.name,
      createdAt: participant.createdAt,
      key,
    })
    .from(participant)
    .innerJoin(site, eq(site.id, participant.siteId))
    .where(
      and(
        inArray(participant.siteId, [...want.siteIds]),
        want.search ? matches(want.search, want.byName) : undefined,
        want.state ? needsOf(want.state, now) : undefined,
        after ?? undefined,
      ),
    )
    .orderBy(asc(key), asc(participant.id))
    .limit(want.limit);
}

/**
 * What a stored diary says was felt, as rows `felt(kind, strength)`; the headache asked for by itself is one of them. `d` is the diary.
 */
export const feltRows = sql.raw(`lateral (
  select f ->> 'kind' as kind, max((f ->> 'strength')::int) as strength
  from jsonb_array_elements((d.answers -> 'effects') || jsonb_build_array(
    jsonb_build_object('kind', 'headache', 'strength', d.answers -> 'headacheAfter'))) f
  where (f ->> 'strength')::int > 0 group by f ->> 'kind') felt`);

export interface LastEffect {
  kind: string;
  strength: number;
  at: string;
}

/** The strongest effect in the newest diary of each person; left out where that one says that nothing was felt. */
export async function listLastEffects(db: Db, participantIds: readonly string[]): Promise<Map<string, LastEffect>> {
  if (participantIds.length === 0) return new Map();
  const newest = db
    .selectDistinctOn([diary.participantId], {
      participantId: diary.participantId,
      writtenAt: diary.writtenAt,
      answers: diary.answers,
    })
    .from(diary)
    .where(and(inArray(diary.participantId, [...participantIds]), eq(diary.kind, 'after')))
    .orderBy(diary.participantId, desc(diary.writtenAt), desc(diary.id))
    .as('d');
  const rows = await db
    .selectDistinctOn([newest.participantId], {
      participantId: newest.participantId,
      at: newest.writtenAt,
      kind: sql<string>`felt.kind`,
      strength: sql<number>`felt.strength`,
    })
    .from(newest)
    .innerJoin(feltRows, sql`true`)
    .orderBy(newest.participantId, sql`felt.strength desc, felt.kind`);
  return new Map(rows.map(({ participantId, ...effect }) => [participantId, effect]));
}

/** Open lockouts of one person with the row of the worklist that waits for them, newest first. */
export async function listLockoutsWithItems(db: Db, participantId: string, now: string) {
  return db
    .selectDistinctOn([lockout.openedAt, lockout.id], {
      id: lockout.id,
      level: lockout.level,
      code: lockout.code,
      source: lockout.source,
      openedAt: lockout.openedAt,
      until: lockout.until,
      closedAt: lockout.closedAt,
      closedWhy: lockout.closedWhy,
      worklistItemId: worklistItem.id,
    })
    .from(lockout)
    .leftJoin(worklistItem, and(eq(worklistItem.lockoutId, lockout.id), isNull(worklistItem.closedAt)))
    .where(
      and(
        eq(lockout.participantId, participantId),
        isNull(lockout.closedAt),
        or(isNull(lockout.until), gt(lockout.until, now)),
      ),
    )
    .orderBy(desc(lockout.openedAt), desc(lockout.id));
}

export interface TrendRow {
  sessionId: string;
  courseId: string;
  plannedSessionId: string;
  at: string;
  /** Worst of the diary's pages. */
  headache: number | null;
  worstEffect: number | null;
  /** The diary's own word for the skin. */
  skin: string | null;
  deliveredUc: number | null;
  plannedUc: number;
  worstContactKiloohm: number | null;
}

/** Sessions that began, oldest first, with what was felt and measured. */
export async function listTrends(db: Db, participantId: string): Promise<TrendRow[]> {
  const worst = (column: 'headache' | 'worst_strength') =>
    sql<number | null>`(select max(d.${sql.raw(column)}) from ${diary} d where d.session_id = ${session.id})`;
  return db
    .select({
      sessionId: session.id,
      courseId: session.courseId,
      plannedSessionId: session.plannedSessionId,
      at: sql<string>`${session.startedAt}`.mapWith(session.startedAt),
      headache: worst('headache'),
      worstEffect: worst('worst_strength'),
      skin: sql<
        string | null
      >`(select d.answers ->> 'skin' from ${diary} d where d.session_id = ${session.id} and d.kind = 'after')`,
      deliveredUc: session.deliveredUc,
      plannedUc: permit.chargeUc,
      worstContactKiloohm: sql<number | null>`(select max((c ->> 'worstKiloohm')::float8)
        from jsonb_array_elements(${session.summary} -> 'contact') c)`,
    })
    .from(session)
    .innerJoin(permit, eq(permit.id, session.permitId))
    .where(
      and(
        eq(session.participantId, participantId),
        sql`${session.startedAt} is not null and ${session.closedWhy} is distinct from 'unused'`,
      ),
    )
    .orderBy(asc(session.startedAt), asc(session.id));
}
