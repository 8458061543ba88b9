/**
 * Opened from the "stop these mails" link. Stops them after one press, without signing in: a mail program that opens links
 * by itself must not stop anything.
 */
import { useTranslation } from 'react-i18next';
import { PublicShell } from '@/components/layout/PublicShell';
import { useCall } from '@/components/runtime/api';
import { useFragment } from '@/components/runtime/fragment';
import { Button } from '@/components/ui/Button';
import { Link } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { stopMails } from '@/shared/contracts/account';

export function StopMailsScreen() {
  const { t } = useTranslation('public');
  const token = useFragment('token');
  const stop = useCall(stopMails);
  if (stop.data) {
    return (
      <PublicShell title={t('stopMails.doneTitle')}>
        <Text>{t('stopMails.done')}</Text>
        <Link href="/sign-in">{t('stopMails.toSignIn')}</Link>
      </PublicShell>
    );
  }
  return (
    <PublicShell title={t('stopMails.title')} lead={t('stopMails.lead')}>
      {stop.error || token === null ? (
        <Notice tone="stop" title={stop.error?.offline ? t('signIn.offline') : t('stopMails.unknown')} announce="assertive" />
      ) : null}
      {token === null ? null : (
        <Button label={t('stopMails.go')} size="large" grow busy={stop.isPending} onPress={() => stop.mutate({ body: { token } })} />
      )}
    </PublicShell>
  );
}
