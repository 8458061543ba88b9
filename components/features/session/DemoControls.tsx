/**
 * A demo's own, small and quiet: faster time, and a pad that comes off. Shown only where `/api/me` says that this is a demo.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { demoSpeeds } from '@/components/runtime/demo-speed';
import type { SessionRun } from '@/components/runtime/session-run';
import { Button } from '@/components/ui/Button';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';

export function DemoControls({
  session,
  speed,
  position,
}: {
  session: SessionRun;
  speed: number;
  position: string | undefined;
}) {
  const { t } = useTranslation('session');
  return (
    <View
      role="group"
      aria-label={t('demo.group')}
      style={{ flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: space[1] }}
    >
      <Text size="fine" tone="muted">
        {t('demo.speed', { speed })}
      </Text>
      {demoSpeeds.map((one) => (
        <Button
          key={one}
          kind="quiet"
          size="small"
          label={t('demo.times', { speed: one })}
          accessibleLabel={t('demo.timesFaster', { speed: one })}
          onPress={() => session.setSpeed(one)}
        />
      ))}
      {position ? (
        <Button kind="quiet" size="small" label={t('demo.lift')} onPress={() => session.stimulator()?.lift(position)} />
      ) : null}
    </View>
  );
}
