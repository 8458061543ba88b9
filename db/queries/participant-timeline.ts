// Everything that happened to one person as one list, newest first: one statement over the tables of the record. Facts are codes and
// numbers; no message, no reason and no remark in a person's own words leaves here.

import { sql } from 'drizzle-orm';
import type { Db } from '@/db/client';

export type TimelineKind =
  | 'enrolled'
  | 'consent'
  | 'screening'
  | 'training'
  | 'watched_session'
  | 'device'
  | 'prescription'
  | 'acknowledgement'
  | 'session'
  | 'missed'
  | 'diary'
  | 'lockout'
  | 'review'
  | 'message'
  | 'pause'
  | 'withdrawal';

export interface TimelineRecord {
  id: string;
  kind: TimelineKind;
  at: string;
  facts: Record<string, string | number | boolean | null>;
  by: string | null;
  sessionId: string | null;
  prescriptionId: string | null;
}

/** An instant as the rest of the house writes it. */
const text = (column: string) => `to_char(${column} at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`;

/** One branch: where it comes from, when it happened, what is told of it. `by` is an account's id, or already a name. */
function branch(
  kind: TimelineKind,
  part: {
    from: string;
    id: string;
    at: string;
    facts: string;
    by?: string;
    sessionId?: string;
    prescriptionId?: string;
    where?: string;
  },
  participantId: string,
) {
  const { from, id, at, facts, by = 'null', sessionId = 'null', prescriptionId = 'null', where = 'true' } = part;
  const columns = `'${kind}:' || ${id} as id, '${kind}' as kind, ${at} as at, jsonb_build_object(${facts}) as facts,
    ${by}::text as by, ${sessionId}::uuid as session_id, ${prescriptionId}::uuid as prescription_id`;
  return sql`select ${sql.raw(columns)} from ${sql.raw(from)} where ${sql.raw(`${where} and`)} ${sql.raw(
    kind === 'enrolled' || kind === 'withdrawal' ? 't.id' : 't.participant_id',
  )} = ${participantId}`;
}

function branches(participantId: string) {
  const of = (kind: TimelineKind, part: Parameters<typeof branch>[1]) => branch(kind, part, participantId);
  return [
    of('enrolled', { from: 'participant t', id: 't.id', at: 't.created_at', facts: '', by: 't.enrolled_by' }),
    of('withdrawal', {
      from: 'participant t',
      id: 't.id',
      at: 't.closed_at',
      facts: '',
      where: 't.closed_at is not null',
    }),
    of('consent', {
      from: 'consent t',
      id: 't.id',
      at: 't.created_at',
      facts: `'kind', t.kind, 'version', t.document_version, 'signedOn', t.signed_on`,
      by: 't.recorded_by',
    }),
    of('screening', {
      from: 'screening t',
      id: 't.id',
      at: 't.created_at',
      facts: `'outcome', t.outcome, 'validUntil', ${text('t.valid_until')}`,
      by: 't.recorded_by',
    }),
    of('training', {
      from: 'training t',
      id: 't.id',
      at: 't.created_at',
      facts: `'signedOff', t.signed_off, 'validUntil', ${text('t.valid_until')}`,
      by: 't.recorded_by',
    }),
    of('watched_session', {
      from: 'watched_session t',
      id: 't.id',
      at: 't.created_at',
      facts: `'where', t.place, 'tolerated', t.tolerated, 'isNow', t.until is not null`,
      by: 't.recorded_by',
    }),
    of('device', {
      from: 'device_assignment t join device d on d.id = t.device_id',
      id: `t.id || ':assigned'`,
      at: 't.created_at',
      facts: `'event', 'assigned', 'label', d.label`,
      by: 't.by',
    }),
    of('device', {
      from: 'device_assignment t join device d on d.id = t.device_id',
      id: `t.id || ':ended'`,
      at: 't.closed_at',
      facts: `'event', 'ended', 'label', d.label, 'why', t.closed_why`,
      where: 't.closed_at is not null',
    }),
    of('prescription', {
      from: `prescription t left join signature s on s.subject_id = t.id and s.meaning = 'prescribed'`,
      id: 't.id',
      at: 't.signed_at',
      facts: `'version', t.version, 'intensityMilliamp', t.intensity_ua / 1000.0, 'minutes', t.on_ms / 60000.0,
        'isAmendment', t.amends_id is not null`,
      by: 's.name',
      prescriptionId: 't.id',
      where: 't.signed_at is not null',
    }),
    of('acknowledgement', {
      from: 'acknowledgement t join prescription p on p.id = t.prescription_id',
      id: 't.prescription_id',
      at: 't.created_at',
      facts: `'version', p.version`,
      prescriptionId: 't.prescription_id',
    }),
    of('session', {
      from: 'session t join permit p on p.id = t.permit_id',
      id: 't.id',
      at: 'coalesce(t.ended_at, t.started_at)',
      facts: `'endReason', t.end_reason, 'completeness', t.completeness, 'fraction', t.fraction_permille / 1000.0,
        'deliveredMinutes', t.on_ms / 60000.0, 'plannedMinutes', p.on_ms / 60000.0, 'isClosed', t.closed_at is not null`,
      sessionId: 't.id',
      where: `t.started_at is not null and t.closed_why is distinct from 'unused'`,
    }),
    of('missed', {
      from: 'planned_session t',
      id: 't.id',
      at: 't.closed_at',
      facts: `'windowFrom', ${text('t.window_from')}, 'windowTo', ${text('t.window_to')}`,
      where: `t.closed_why = 'missed'`,
    }),
    of('diary', {
      from: 'diary t',
      id: 't.id',
      at: 't.written_at',
      facts: `'page', t.kind, 'headache', t.headache, 'worstStrength', t.worst_strength, 'worstGrade', t.worst_grade,
        'emergencyAdvice', t.emergency_advice`,
      sessionId: 't.session_id',
    }),
    of('lockout', {
      from: 'lockout t',
      id: `t.id || ':opened'`,
      at: 't.opened_at',
      facts: `'event', 'opened', 'level', t.level, 'code', t.code, 'source', t.source, 'until', ${text('t.until')}`,
    }),
    of('lockout', {
      from: 'lockout t',
      id: `t.id || ':closed'`,
      at: 't.closed_at',
      facts: `'event', 'closed', 'level', t.level, 'code', t.code, 'why', t.closed_why`,
      where: 't.closed_at is not null',
    }),
    of('review', {
      from: 'review t join worklist_item w on w.id = t.item_id',
      id: 't.id',
      at: 't.created_at',
      facts: `'decision', t.decision, 'why', w.why`,
      by: 't.name',
      sessionId: 'w.session_id',
    }),
    of('message', {
      from: 'message t',
      id: 't.id',
      at: 't.created_at',
      facts: `'fromSite', t.from_site`,
      by: 'case when t.from_site then t.account_id end',
    }),
    of('pause', {
      from: '(select u.*, c.participant_id from course_pause u join course c on c.id = u.course_id) t',
      id: `t.id || ':paused'`,
      at: 't.created_at',
      facts: `'paused', true`,
      by: 't.by',
    }),
    of('pause', {
      from: '(select u.*, c.participant_id from course_pause u join course c on c.id = u.course_id) t',
      id: `t.id || ':resumed'`,
      at: 't.closed_at',
      facts: `'paused', false`,
      where: 't.closed_at is not null',
    }),
  ];
}

/** One page, newest first; of two in the same instant the one with the later id. */
export async function listTimeline(
  db: Db,
  participantId: string,
  page: { limit: number; after: { at: string; id: string } | null },
): Promise<TimelineRecord[]> {
  const all = sql.join(branches(participantId), sql` union all `);
  const after = page.after ? sql`(t.at, t.id) < (${page.after.at}::timestamptz, ${page.after.id})` : sql`true`;
  const { rows } = await db.execute<{
    id: string;
    kind: TimelineKind;
    at: string;
    facts: TimelineRecord['facts'];
    by: string | null;
    session_id: string | null;
    prescription_id: string | null;
  }>(sql`
    select t.id, t.kind, ${sql.raw(text('t.at'))} as at, t.facts, coalesce(a.name, t.by) as by, t.session_id, t.prescription_id
    from (${all}) t left join account a on a.id = t.by
    where ${after}
    order by t.at desc, t.id desc
    limit ${page.limit}`);
  return rows.map(({ session_id: sessionId, prescription_id: prescriptionId, ...same }) => ({
    ...same,
    sessionId,
    prescriptionId,
  }));
}
