/**
 * What `/` does: sends each role to its first page, and who is not signed in to the sign-in page.
 */
import { Redirect } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { PublicShell } from '@/components/layout/PublicShell';
import { firstPageOf, useMeState } from '@/components/runtime/me';
import { FailedState, LoadingState } from '@/components/ui/States';

export function HomeDoor() {
  const { t } = useTranslation('common');
  const here = useMeState();
  if (here.state === 'signed_in') return <Redirect href={firstPageOf(here.me.account.role)} />;
  if (here.state === 'signed_out') return <Redirect href="/sign-in" />;
  if (here.state === 'second_factor') return <Redirect href="/second-factor" />;
  return (
    <PublicShell title={t('product')}>
      {here.state === 'failed' ? <FailedState onRetry={here.retry} /> : <LoadingState />}
    </PublicShell>
  );
}
