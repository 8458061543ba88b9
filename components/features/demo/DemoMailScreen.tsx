/**
 * The demo's mailbox: what the local catcher took. It exists only in the demo; the mail's own HTML is not run, its text is shown.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { Linking, View } from 'react-native';
import { PublicShell } from '@/components/layout/PublicShell';
import { useRead } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { TextField } from '@/components/ui/Field';
import { Link } from '@/components/ui/Link';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { listDemoMail } from '@/shared/contracts/house';

/** Links in a mail's text, so that they can be pressed here. */
function linksOf(text: string): string[] {
  return [...new Set(text.match(/https?:\/\/[^\s<>"]+/g) ?? [])];
}

const everyMs = 4000;

export function DemoMailScreen() {
  const { t } = useTranslation('public');
  const format = useFormat();
  const [to, setTo] = useState('');
  const read = useRead(listDemoMail, { query: {}, everyMs });
  const wanted = to.trim().toLowerCase();
  const mails = read.data?.filter((mail) => mail.to.toLowerCase().includes(wanted)) ?? [];
  return (
    <PublicShell title={t('mailbox.title')} lead={t('mailbox.lead')} wide>
      <Link href="/sign-in">{t('mailbox.back')}</Link>
      <TextField label={t('mailbox.filter')} value={to} onChange={setTo} />
      {read.isPending ? <LoadingState /> : null}
      {read.error ? <FailedState onRetry={() => void read.refetch()} /> : null}
      {read.data && mails.length === 0 ? <EmptyState title={t('mailbox.empty')} /> : null}
      <View style={{ gap: space[4] }}>
        {mails.map((mail) => (
          <Card key={mail.id} heading={mail.subject} note={t('mailbox.head', { to: mail.to, at: format.dayTime(mail.sentAt) })}>
            <View style={{ gap: space[3] }}>
              <Text>{mail.text.trim()}</Text>
              {linksOf(mail.text).map((link) => (
                <Button
                  key={link}
                  kind="secondary"
                  label={t('mailbox.open')}
                  accessibleLabel={t('mailbox.openWhich', { path: new URL(link).pathname, to: mail.to })}
                  onPress={() => void Linking.openURL(link)}
                />
              ))}
            </View>
          </Card>
        ))}
      </View>
    </PublicShell>
  );
}
