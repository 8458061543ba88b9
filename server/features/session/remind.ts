// One kind word when the window of today opens, for somebody who could start. Whether they may is asked when they do.

import { findNextReminder, findPersonToTell, findReminder, listDueReminders, reminderKey } from '@/db/queries/notice';
import type { Job } from '@/server/action';
import { jobBatch } from '@/shared/rules/house-limits';
import { afterQuietHours } from '@/shared/rules/quiet-hours';

export const remind: Job = {
  name: 'session.remind',
  listDue: (db, now) => listDueReminders(db, now, jobBatch),
  nextDue: findNextReminder,
  async run(id, tx) {
    const now = await tx.now();
    const planned = await findReminder(tx.db, id, now);
    const person = planned && (await findPersonToTell(tx.db, planned.participantId));
    if (!person) return;
    tx.tell({
      kind: 'planned_reminder',
      toEmail: person.email,
      language: person.language,
      facts: { name: person.name, path: '/today' },
      key: reminderKey(id),
      dueAt: afterQuietHours(now, person.zone),
      dropAt: planned.windowTo,
    });
  },
};
