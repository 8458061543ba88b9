/**
 * Stands before a group of screens: shows them to the roles they serve, sends everybody else to where they belong. The
 * server checks each door again; this only spares people a page of refusals.
 */
import { Redirect, Slot, usePathname, useSegments } from 'expo-router';
import { useMemo } from 'react';
import { useTranslation } from 'react-i18next';
import { PublicShell } from '@/components/layout/PublicShell';
import { railOf } from '@/components/layout/rail-of';
import { ShellAccountProvider, type ShellAccount } from '@/components/layout/shell-account';
import { firstPageOf, useMeState, useSignOut } from '@/components/runtime/me';
import { useSessionRun } from '@/components/runtime/use-session-run';
import { FailedState, LoadingState } from '@/components/ui/States';
import { screens } from '@/shared/contracts/screens';
import { isStaffRole } from '@/shared/values/roles';
import type { Me } from '@/shared/contracts/account';

function shellAccountOf(me: Me, onSignOut: () => void): ShellAccount {
  const staff = isStaffRole(me.account.role);
  return {
    personName: me.account.name,
    siteName: me.sites.map((site) => site.name).join(', '),
    rail: railOf(me.account.role),
    onSignOut,
    ...(staff ? { accountHref: '/account' } : me.account.role === 'participant' ? { accountHref: '/me' } : {}),
  };
}

export function RoleGate() {
  const { t } = useTranslation('common');
  const here = useMeState();
  const pathname = usePathname();
  const segments = useSegments();
  const signOut = useSignOut();
  const me = here.state === 'signed_in' ? here.me : null;
  // A session that runs on this phone is found again on whichever page opens first.
  useSessionRun();
  const account = useMemo(() => (me ? shellAccountOf(me, () => void signOut()) : {}), [me, signOut]);

  if (here.state === 'signed_out') return <Redirect href={`/sign-in?next=${encodeURIComponent(pathname)}`} />;
  if (here.state === 'second_factor') return <Redirect href="/second-factor" />;
  if (!me) {
    return (
      <PublicShell title={t('product')}>
        {here.state === 'failed' ? <FailedState onRetry={here.retry} /> : <LoadingState />}
      </PublicShell>
    );
  }
  const template = `/${segments.filter((segment) => !segment.startsWith('(')).join('/')}`;
  const door = screens.find((screen) => screen.path === template);
  if (!door?.who.includes(me.account.role)) return <Redirect href={firstPageOf(me.account.role)} />;
  // Staff without a second factor, where the house asks for one, can do nothing but turn it on.
  if (me.secondFactor.required && !me.secondFactor.enabled && template !== '/account') return <Redirect href="/account" />;
  return (
    <ShellAccountProvider account={account}>
      <Slot />
    </ShellAccountProvider>
  );
}
