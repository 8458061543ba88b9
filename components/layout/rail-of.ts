/**
 * What stands in the left rail for a role: the places whose screens serve it. It must not list roles itself; the table
 * of screens does.
 */
import type { Href } from 'expo-router';
import type { RailId, RailItem } from '@/components/layout/shell-account';
import { screens } from '@/shared/contracts/screens';
import type { Role } from '@/shared/values/roles';

const places: readonly { id: RailId; path: string; href: Href }[] = [
  { id: 'worklist', path: '/worklist', href: '/worklist' },
  { id: 'participants', path: '/participants', href: '/participants' },
  { id: 'reports', path: '/reports', href: '/reports' },
  { id: 'protocols', path: '/protocols', href: '/protocols' },
  { id: 'devices', path: '/devices', href: '/devices' },
  { id: 'audit', path: '/audit', href: '/audit' },
  { id: 'site', path: '/site', href: '/site' },
];

export function railOf(role: Role, counts: Partial<Record<RailId, number>> = {}): RailItem[] {
  return places
    .filter((place) => screens.some((screen) => screen.path === place.path && screen.who.includes(role)))
    .map((place) => ({ id: place.id, href: place.href, count: counts[place.id] }));
}
