// The six roles, and who may knock at a door. A role is listed one by one wherever it may pass; nothing is inherited.

export const roles = ['participant', 'caregiver', 'coordinator', 'clinician', 'monitor', 'administrator'] as const;
export type Role = (typeof roles)[number];

/** Roles that belong to sites. */
export const staffRoles = ['coordinator', 'clinician', 'monitor', 'administrator'] as const satisfies readonly Role[];
export type StaffRole = (typeof staffRoles)[number];

/** Staff who care for people: may enrol, train and equip. */
export const careRoles = ['coordinator', 'clinician'] as const satisfies readonly Role[];

/** Staff who read people's records at their own sites. */
export const recordRoles = ['coordinator', 'clinician', 'monitor'] as const satisfies readonly Role[];

/** True when the role belongs to sites. */
export function isStaffRole(role: Role): role is StaffRole {
  return role === 'coordinator' || role === 'clinician' || role === 'monitor' || role === 'administrator';
}
