// Who hears of a missed session: the participant, kindly, and the caregivers who may. Nobody is told at night, and nothing medical is said:
// neither what was planned nor why it matters.

import type { PlannedRecord } from '@/db/queries/course-plan';
import { findOpenPause } from '@/db/queries/course-state';
import { listOpenLockouts } from '@/db/queries/lockout';
import { findPersonToTell, listMissedMailCaregivers, wasTried } from '@/db/queries/notice';
import type { Tx } from '@/server/action';
import { afterQuietHours, nudgeDropAt } from '@/shared/rules/quiet-hours';
import { firstNameOf } from '@/shared/values/first-name';

export async function tellOfMissed(tx: Tx, missed: PlannedRecord, now: string): Promise<void> {
  const person = await findPersonToTell(tx.db, missed.participantId);
  if (!person?.canSignIn || (await wasTried(tx.db, missed.id))) return;
  // Whoever may not start has missed nothing that a nudge could mend.
  if ((await findOpenPause(tx.db, missed.courseId)) !== null) return;
  if ((await listOpenLockouts(tx.db, missed.participantId, now)).length > 0) return;
  const dueAt = afterQuietHours(now, person.zone);
  const dropAt = nudgeDropAt(dueAt);
  tx.tell({
    kind: 'missed_nudge',
    toEmail: person.email,
    language: person.language,
    facts: { name: person.name, path: '/sign-in' },
    key: `missed_nudge:${missed.id}`,
    ...{ dueAt, dropAt },
  });
  for (const { id, name, email, language } of await listMissedMailCaregivers(tx.db, missed.participantId)) {
    tx.tell({
      kind: 'caregiver_missed',
      toEmail: email,
      language,
      facts: {
        name,
        participantName: firstNameOf(person.name),
        path: '/sign-in',
        stopPath: `/stop-mails#token=${tx.stopTokenFor(id)}`,
      },
      key: `caregiver_missed:${missed.id}:${id}`,
      ...{ dueAt, dropAt },
    });
  }
}
