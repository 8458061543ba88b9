// Whether a person may invite this address to help. Whether it was invited already is the database's knowledge.

import type { Role } from '@/shared/values/roles';
import { mostCaregivers } from './house-limits';

export type CaregiverRefusal =
  'caregiver.address_is_staff_or_participant' | 'caregiver.too_many' | 'participant.withdrawn';

/** null = may be invited. `roleOfAddress` is null for an address that nobody stands behind yet. */
export function caregiverRefusal(facts: {
  readonly isWithdrawn: boolean;
  readonly roleOfAddress: Role | null;
  /** Invited or active now. */
  readonly caregivers: number;
}): CaregiverRefusal | null {
  if (facts.isWithdrawn) return 'participant.withdrawn';
  // An account has one role, and staff see records by their work, not by a private invitation.
  if (facts.roleOfAddress !== null && facts.roleOfAddress !== 'caregiver')
    return 'caregiver.address_is_staff_or_participant';
  return facts.caregivers >= mostCaregivers ? 'caregiver.too_many' : null;
}
