// A caregiver as the person who invited them sees them.

import type { CaregiverRecord } from '@/db/queries/caregiver';
import type { CaregiverView } from '@/shared/contracts/caregiver';

export function viewCaregiver(caregiver: CaregiverRecord): CaregiverView {
  const { id, name, email, accountId, shares, mailsStoppedAt, hasCode, createdAt } = caregiver;
  const state = accountId === null ? 'invited' : 'active';
  return { id, name, email, state, shares, mailsStopped: mailsStoppedAt !== null, hasCode, since: createdAt };
}
