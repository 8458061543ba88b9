/**
 * Who is signed in, for the shells: said once by the group's layout, so that no screen has to pass it on. It must not
 * fetch anything and must not decide what a role may do.
 */
import { createContext, use, type ReactNode } from 'react';
import type { Href } from 'expo-router';

/** The places a rail may lead to; each has its word in `common:nav`. */
export type RailId = 'worklist' | 'participants' | 'reports' | 'protocols' | 'devices' | 'site' | 'audit';

export interface RailItem {
  id: RailId;
  href: Href;
  /** How many wait there. */
  count?: number;
}

export interface ShellAccount {
  personName?: string;
  siteName?: string;
  /** Staff only: what this role's rail holds, see `railOf`. */
  rail?: readonly RailItem[];
  /** Person's own page: `/me`, `/account`. */
  accountHref?: Href;
  onSignOut?(): void;
  /** Where a person belongs to several sites: the control that changes between them. */
  siteControl?: ReactNode;
  /** Stands above everything on each page: no network, demo clock. */
  banner?: ReactNode;
}

const ShellAccountContext = createContext<ShellAccount>({});

export function ShellAccountProvider({ account, children }: { account: ShellAccount; children: ReactNode }) {
  return <ShellAccountContext value={account}>{children}</ShellAccountContext>;
}

export function useShellAccount(): ShellAccount {
  return use(ShellAccountContext);
}
