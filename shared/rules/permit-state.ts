// What a stored permit is at an instant: live, used, expired or void. Whether a device may start on it is asked of permit.ts.

import { parseInstant } from '@/shared/values/zone';

export type PermitWord = 'live' | 'used' | 'expired' | 'void';

/** `voidedBy` is null unless it is void. A permit that ends at T is over at T, whether or not anybody has closed it yet. */
export function permitStateAt(
  permit: { readonly closedWhy: string | null; readonly expiresAt: string },
  now: string,
): { state: PermitWord; voidedBy: string | null } {
  const { closedWhy } = permit;
  if (closedWhy === 'used') return { state: 'used', voidedBy: null };
  if (closedWhy?.startsWith('void_')) return { state: 'void', voidedBy: closedWhy.slice('void_'.length) };
  const end = parseInstant(permit.expiresAt);
  const instant = parseInstant(now);
  const isLive = closedWhy === null && end !== undefined && instant !== undefined && instant < end;
  return { state: isLive ? 'live' : 'expired', voidedBy: null };
}
