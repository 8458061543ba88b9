// Why a live permit can be made void. Stored as `void_<cause>`, never renamed.

export const voidCauses = ['amended', 'paused', 'lockout', 'withdrawn', 'device'] as const;
export type VoidCause = (typeof voidCauses)[number];
