/**
 * Me: how the pages look, notices, caregivers, one's own records, password, signing out.
 */
import { useRouter } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { useMe, useSignOut } from '@/components/runtime/me';
import { useUnsent } from '@/components/runtime/unsent';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Dialog } from '@/components/ui/Dialog';
import { ButtonLink } from '@/components/ui/Link';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { AppearanceCard } from './AppearanceCard';
import { NoticesCard } from './NoticesCard';
import { PasswordCard } from './PasswordCard';

export function MyScreen() {
  const { t } = useTranslation('participant');
  const me = useMe();
  return (
    <ParticipantShell title={me?.account.name ?? t('me.title')} {...(me?.participant ? { lead: t('me.lead', { code: me.participant.code, site: me.sites[0]?.name ?? '' }) } : {})}>
      <Card heading={t('me.caregivers')}>
        <View style={{ gap: space[3] }}>
          <Text>{t('me.caregiversHelp')}</Text>
          <ButtonLink href="/me/caregivers" kind="secondary" grow label={t('me.caregiversGo')} />
        </View>
      </Card>
      <NoticesCard />
      <AppearanceCard />
      <Card heading={t('me.records')}>
        <View style={{ gap: space[3] }}>
          <Text>{t('me.recordsHelp')}</Text>
          <Button kind="secondary" grow label={t('me.recordsGo')} onPress={() => window.location.assign('/api/me/export')} />
        </View>
      </Card>
      <PasswordCard />
      <SignOut />
    </ParticipantShell>
  );
}

/** Signing out with records that are not sent yet asks first; they stay on the phone and are sent after the next sign-in. */
function SignOut() {
  const { t } = useTranslation('participant');
  const router = useRouter();
  const signOut = useSignOut();
  const { count } = useUnsent();
  const [asks, setAsks] = useState(false);
  const go = async () => {
    await signOut();
    router.replace('/sign-in');
  };
  return (
    <View style={{ paddingTop: space[4] }}>
      <Button kind="secondary" grow label={t('me.signOut')} onPress={() => (count > 0 ? setAsks(true) : void go())} />
      <Dialog
        open={asks}
        title={t('me.unsentTitle')}
        onClose={() => setAsks(false)}
        actions={
          <>
            <Button kind="secondary" label={t('me.stay')} onPress={() => setAsks(false)} />
            <Button label={t('me.signOutAnyway')} onPress={() => void go()} />
          </>
        }
      >
        <Text>{t('me.unsent', { count })}</Text>
      </Dialog>
    </View>
  );
}
