/**
 * Whether this phone may show a notice when something is planned. Mail is the channel that always works; this is beside it.
 */
import { useEffect, useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { askForNotices, noticesAllowed, type NoticeState } from '@/components/runtime/notices';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';

export function NoticesCard() {
  const { t } = useTranslation('participant');
  const [state, setState] = useState<NoticeState | null>(null);
  useEffect(() => {
    void noticesAllowed().then(setState);
  }, []);
  return (
    <Card heading={t('notices.title')}>
      <View style={{ gap: space[3] }}>
        <Text>{t('notices.mail')}</Text>
        {state ? <Text tone="muted">{t(`notices.${state}`)}</Text> : null}
        {state === 'not_asked' ? <Button kind="secondary" grow label={t('notices.allow')} onPress={() => void askForNotices().then(setState)} /> : null}
      </View>
    </Card>
  );
}
