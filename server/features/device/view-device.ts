// A stimulator as the register shows it. Whoever may not know names sees the person's code in their place.

import type { DeviceRecord } from '@/db/queries/device';
import type { DeviceView } from '@/shared/contracts/device';
import type { Role } from '@/shared/values/roles';

export function viewDevice(device: DeviceRecord, role: Role): DeviceView {
  const { assignedTo, ...own } = device;
  const seesNames = role === 'coordinator' || role === 'clinician';
  return {
    ...own,
    assignedTo: assignedTo && { ...assignedTo, name: seesNames ? assignedTo.name : assignedTo.code },
  };
}
