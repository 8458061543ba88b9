// Who did what at own sites, newest first. Reading the trail of one person is itself in the trail.

import { listAudit, type AuditRow } from '@/db/queries/audit';
import { decodeCursor, encodeCursor } from '@/db/queries/cursor';
import { findParticipantInReach } from '@/db/queries/reach';
import { action, invalid, notFound, type AccountActor } from '@/server/action';
import { readAudit as contract, type AuditEntry } from '@/shared/contracts/report';
import { withoutIdentity } from '@/shared/rules/pseudonym';
import { parseInstant } from '@/shared/values/zone';

export const readAudit = action(contract, async ({ actor, query }, tx) => {
  const { limit, participantId, siteId, kind } = query;
  const after = query.cursor === undefined ? null : placeOf(query.cursor);
  if (after === 'unknown') return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  if (siteId !== undefined && !actor.siteIds.includes(siteId)) return notFound();
  const siteChainOnly = actor.role === 'administrator';
  if (participantId !== undefined && !(await findParticipantInReach(tx.db, actor, participantId))) return notFound();

  const siteIds = siteId === undefined ? actor.siteIds : [siteId];
  const rows = await listAudit(tx.db, { siteIds, participantId, kind, siteChainOnly }, limit + 1, after);
  const shown = rows.slice(0, limit);
  const last = shown.at(-1);
  const about = participantId ?? siteId ?? actor.siteIds[0];
  tx.record({
    participantId,
    siteId: siteIds[0],
    kind: 'read',
    subject: about ? { kind: 'audit', id: about } : undefined,
  });
  return {
    items: shown.map((row) => view(row, actor)),
    nextCursor: last && rows.length > limit ? encodeCursor([last.at, last.chain, last.sequence]) : null,
  };
});

function placeOf(cursor: string): { at: string; chain: string; sequence: number } | 'unknown' {
  const [at, chain, sequence] = decodeCursor(cursor) ?? [];
  if (typeof at !== 'string' || parseInstant(at) === undefined) return 'unknown';
  if (typeof chain !== 'string' || !Number.isSafeInteger(sequence) || typeof sequence !== 'number') return 'unknown';
  return { at, chain, sequence };
}

/** A monitor checks the trail by pseudonym: people are their codes, and what identifies them stays out. */
function view(row: AuditRow, { role }: AccountActor): AuditEntry {
  const isPseudonymous = role === 'monitor';
  const isPerson = row.actorRole === 'participant' || row.actorRole === 'caregiver';
  const name = isPseudonymous && isPerson ? (row.participantCode ?? row.actorRole) : row.actorName;
  return {
    id: `${row.chain}:${row.sequence}`,
    at: row.at,
    chain: row.chain,
    sequence: row.sequence,
    actor: { name, role: row.actorRole },
    action: row.action,
    kind: row.kind,
    participantCode: row.participantCode,
    subject: row.subjectKind !== null && row.subjectId !== null ? { kind: row.subjectKind, id: row.subjectId } : null,
    before: isPseudonymous ? withoutIdentity(row.before) : row.before,
    after: isPseudonymous ? withoutIdentity(row.after) : row.after,
    why: row.why,
    hash: row.hash,
    previousHash: row.previousHash,
  };
}
