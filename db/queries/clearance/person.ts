// Clearance: everything that is known of one person in one row: account, consents, screening, training, course, prescription,
// device, pre-check, open permit. Loads; whether it is enough is the rule's business.

import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { account } from '@/db/schema/account';
import { acknowledgement, course, coursePause, prescription, signature } from '@/db/schema/course';
import { device, deviceAssignment, deviceState } from '@/db/schema/device';
import { consent, participant, screening, training, watchedSession } from '@/db/schema/participant';
import { permit, precheck, review, session, worklistItem } from '@/db/schema/session';
import { site } from '@/db/schema/site';
import { isIntact, prescriptionHashOf } from '../content-hash';
import { recallMatter } from '../course';
import { contentOf } from '../prescription';

/** The newest of a person's consents of a kind that is not withdrawn. */
function consentVersion(kind: 'own' | 'guardian' | 'assent') {
  return sql<string | null>`(select c.document_version from ${consent} c where c.participant_id = ${participant.id}
    and c.kind = ${kind} and c.closed_at is null order by c.created_at desc, c.id desc limit 1)`;
}

function newestOf(table: typeof screening | typeof training) {
  return sql`(select n.id from ${table} n where n.participant_id = ${participant.id} order by n.created_at desc, n.id desc limit 1)`;
}

/** In force before all; else the draft; of a course that is over, what was in force last. */
const prescriptionOfCourse = sql`(select p.id from ${prescription} p where p.course_id = ${course.id}
  order by (p.signed_at is not null and p.closed_at is null) desc, (p.closed_at is null) desc, p.version desc nulls last,
    p.created_at desc limit 1)`;

/** The pre-check asked for, or the newest complete one; never one that a permit was given for. */
function precheckOf(precheckId: string | undefined) {
  const wanted = precheckId === undefined ? sql`true` : sql`a.id = ${precheckId}`;
  return sql`(select a.id from ${precheck} a where a.participant_id = ${participant.id} and a.complete and ${wanted}
    and not exists (select 1 from ${permit} u where u.precheck_id = a.id) order by a.answered_at desc, a.id desc limit 1)`;
}

export async function loadPerson(db: Db, participantId: string, now: string, precheckId: string | undefined) {
  const [row] = await db
    .select({
      participant,
      site,
      accountState: account.state,
      course,
      pauseId: coursePause.id,
      prescription,
      screening: {
        outcome: screening.outcome,
        validUntil: screening.validUntil,
        seizureHistory: screening.seizureHistory,
      },
      training: { signedOff: training.signedOff, validUntil: training.validUntil },
      deviceId: device.id,
      deviceState: deviceState.state,
      precheck,
      openPermit: { id: permit.id, issuedAt: permit.issuedAt, expiresAt: permit.expiresAt },
      ownConsent: consentVersion('own'),
      guardianConsent: consentVersion('guardian'),
      assent: consentVersion('assent'),
      isConsentWithdrawn: sql<boolean>`coalesce((select c.closed_at is not null from ${consent} c
        where c.participant_id = ${participant.id} and c.kind = 'own' order by c.created_at desc, c.id desc limit 1), false)`,
      watched: sql<number>`(select count(*)::int from ${watchedSession} w where w.participant_id = ${participant.id} and w.until is null)`,
      isWatchedNow: sql<boolean>`exists (select 1 from ${watchedSession} w where w.participant_id = ${participant.id} and w.until > ${now})`,
      signedHashes: sql<
        string[]
      >`coalesce((select array_agg(g.content_hash) from ${signature} g where g.subject_id = ${prescription.id}), '{}')`,
      hasSecondSignature: sql<boolean>`exists (select 1 from ${signature} g where g.subject_id = ${prescription.id} and g.meaning = 'second_signature')`,
      acknowledgedVersion: sql<number>`coalesce((select max(p.version) from ${prescription} p
        join ${acknowledgement} k on k.prescription_id = p.id where p.course_id = ${course.id}), 0)`,
      sessionsDone: sql<number>`(select count(*)::int from ${session} d where d.course_id = ${course.id} and d.started_at is not null
        and (d.closed_at is null or (d.closed_why = 'recorded' and coalesce(d.completeness, 'partial') <> 'not_delivered')))`,
      recallCallAt: sql<
        string | null
      >`(select max(r.created_at) from ${review} r join ${worklistItem} i on i.id = r.item_id
        where r.participant_id = ${participant.id} and i.why = ${recallMatter})`.mapWith(review.createdAt),
    })
    .from(participant)
    .innerJoin(site, eq(site.id, participant.siteId))
    .leftJoin(account, eq(account.id, participant.accountId))
    .leftJoin(
      course,
      eq(
        course.id,
        sql`(select c.id from ${course} c where c.participant_id = ${participant.id}
          order by (c.closed_at is null) desc, c.created_at desc limit 1)`,
      ),
    )
    .leftJoin(coursePause, and(eq(coursePause.courseId, course.id), isNull(coursePause.closedAt)))
    .leftJoin(prescription, eq(prescription.id, prescriptionOfCourse))
    .leftJoin(screening, eq(screening.id, newestOf(screening)))
    .leftJoin(training, eq(training.id, newestOf(training)))
    .leftJoin(
      deviceAssignment,
      and(eq(deviceAssignment.participantId, participant.id), isNull(deviceAssignment.closedAt)),
    )
    .leftJoin(device, eq(device.id, deviceAssignment.deviceId))
    .leftJoin(
      deviceState,
      eq(
        deviceState.id,
        sql`(select t.id from ${deviceState} t where t.device_id = ${device.id} order by t.number desc limit 1)`,
      ),
    )
    .leftJoin(precheck, eq(precheck.id, precheckOf(precheckId)))
    .leftJoin(permit, and(eq(permit.participantId, participant.id), isNull(permit.closedAt)))
    .where(eq(participant.id, participantId));
  if (!row) return null;
  const { signedHashes, ...person } = row;
  return { ...person, isPrescriptionIntact: isPrescriptionIntact(row.prescription, signedHashes) };
}

/** What cannot be read is not intact. */
function isPrescriptionIntact(row: typeof prescription.$inferSelect | null, signed: readonly string[]): boolean {
  if (row === null) return false;
  const content = contentOf(row);
  return content !== null && isIntact(row.signedAt !== null, prescriptionHashOf(content), row.contentHash, signed);
}

export type PersonRow = NonNullable<Awaited<ReturnType<typeof loadPerson>>>;
