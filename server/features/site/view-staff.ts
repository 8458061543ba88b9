// A member of staff as the contract shows them.

import type { StaffRecord } from '@/db/queries/site';

export function viewStaff({ key: _sortKey, ...shown }: StaffRecord) {
  return shown;
}
