// A page of people with their states. A state is judged by a rule, so the asked-for one is looked for among candidates that the database
// narrows down, slice by slice, until the page is full.

import { cutPage } from '@/db/queries/cursor';
import { listParticipants, type ListedParticipant, type ParticipantWanted } from '@/db/queries/participant';
import { loadStanding, type Standing } from '@/db/queries/participant-standing';
import type { Db } from '@/db/client';
import { peopleJudgedAtOnce } from '@/shared/rules/house-limits';
import { standingOf, type StandingAnswer } from '@/shared/rules/participant-standing';

export interface JudgedParticipant {
  listed: ListedParticipant & { key: string };
  standing: Standing;
  judged: StandingAnswer;
}

async function judge(db: Db, rows: readonly (ListedParticipant & { key: string })[], now: string) {
  const standings = await loadStanding(
    db,
    rows.map(({ id }) => id),
    now,
  );
  return rows.flatMap((listed): JudgedParticipant[] => {
    const standing = standings.get(listed.id);
    return standing ? [{ listed, standing, judged: standingOf(standing, now) }] : [];
  });
}

export async function findPage(
  db: Db,
  want: ParticipantWanted,
  now: string,
): Promise<{ page: JudgedParticipant[]; nextCursor: string | null }> {
  // Whoever looks for a rare state reads on in large slices: the number of statements is that of the slices, not of the people.
  const size = want.state === undefined ? want.limit + 1 : Math.max(want.limit + 1, peopleJudgedAtOnce);
  const found: JudgedParticipant[] = [];
  let { after } = want;
  for (;;) {
    const rows = await listParticipants(db, { ...want, limit: size, after }, now);
    const judged = await judge(db, rows, now);
    found.push(...judged.filter((one) => want.state === undefined || one.judged.state === want.state));
    const last = rows.at(-1);
    if (found.length > want.limit || !last || rows.length < size) break;
    after = { key: last.key, id: last.id };
  }
  return cutPage(found, want.limit, ({ listed }) => [listed.key, listed.id]);
}
