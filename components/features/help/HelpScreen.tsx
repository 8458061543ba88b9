/**
 * What is normal, what is not, skin care, contact tips, and whom to call. It works from what was read before when there is no network.
 */
import { useTranslation } from 'react-i18next';
import { Linking, View } from 'react-native';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { useMe } from '@/components/runtime/me';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { ButtonLink } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';

const topics = ['normal', 'skin', 'contact', 'network', 'missed'] as const;

function dial(phone: string): void {
  void Linking.openURL(`tel:${phone.replace(/[^+0-9]/g, '')}`);
}

export function HelpScreen() {
  const { t } = useTranslation('participant');
  const site = useMe()?.sites[0];
  return (
    <ParticipantShell title={t('help.title')} tab="help">
      <Notice tone="stop" title={t('help.emergencyTitle')}>
        <Text>{t('help.emergency')}</Text>
        {site ? <Button kind="stop" size="large" grow label={t('help.callEmergency', { number: site.emergencyNumber })} onPress={() => dial(site.emergencyNumber)} /> : <Text weight="bold">{t('help.emergencyLocal')}</Text>}
      </Notice>
      <Card heading={t('help.clinicTitle')}>
        <View style={{ gap: space[3] }}>
          <Text>{t('help.clinic')}</Text>
          {site ? <Button grow label={t('help.callClinic', { name: site.name, phone: site.phone })} onPress={() => dial(site.phone)} /> : null}
          <ButtonLink href="/messages" kind="secondary" grow label={t('help.write')} />
          <Text size="small" tone="muted">
            {t('help.notAlways')}
          </Text>
        </View>
      </Card>
      {topics.map((topic) => (
        <Card key={topic} heading={t(`help.${topic}.title`)}>
          <View role="list" style={{ gap: space[2] }}>
            {['a', 'b', 'c', 'd'].map((point) => (
              <Text role="listitem" key={point}>
                {t(`help.${topic}.${point}`)}
              </Text>
            ))}
          </View>
        </Card>
      ))}
    </ParticipantShell>
  );
}
