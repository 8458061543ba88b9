/**
 * "May I start, when, how long, how strong — or every reason why not and whom to call." One sentence, the strip, one button.
 */
import { useRouter } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { Button } from '@/components/ui/Button';
import { FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { RefusalList } from './pictures/RefusalList';
import { NextSessionCard } from './NextSessionCard';
import type { TodayState } from './today-state';
import { useToday, type Today } from './use-today';

/** Pre-check reasons are not shown as refusals: the button below is what they ask for. */
const ownStep = ['precheck_missing', 'precheck_expired', 'battery_low', 'diary_missing', 'live_permit'];

const quietKinds: readonly TodayState[] = ['finished', 'withdrawn', 'check', 'start', 'waiting', 'running'];

export function TodayScreen() {
  const { t } = useTranslation('clearance');
  const today = useToday();
  if (today.state === 'loading') {
    return (
      <ParticipantShell title={t('today.loading')} tab="today">
        <LoadingState lines={4} />
      </ParticipantShell>
    );
  }
  if (today.state === 'failed') {
    return (
      <ParticipantShell title={t('today.unknownTitle')} tab="today">
        <FailedState title={t('today.unknownTitle')} detail={t('today.unknownHelp')} onRetry={today.retry} />
      </ParticipantShell>
    );
  }
  return <TodayPage today={today} />;
}

function TodayPage({ today }: { today: Extract<Today, { state: 'ready' }> }) {
  const { t } = useTranslation('clearance');
  const { clearance, course, sentence, day, step, unsent } = today;
  const shown = clearance.reasons.filter((reason) => !ownStep.includes(reason.code));
  // What is allowed already, or over, has nothing in its way.
  const quiet = quietKinds.includes(step.kind);
  return (
    <ParticipantShell title={sentence} tab="today" date={day} footer={<Footer today={today} />}>
      {step.isHeld && shown.length > 0 ? <RefusalList reasons={shown} zone={clearance.zone} now={clearance.asOf} /> : null}
      {course ? <NextSessionCard clearance={clearance} course={course} /> : null}
      {!step.isHeld && !quiet && shown.length > 0 ? (
        <View style={{ gap: space[3] }}>
          <Text heading={2}>{t('today.why')}</Text>
          <RefusalList reasons={shown} zone={clearance.zone} now={clearance.asOf} />
        </View>
      ) : null}
      {unsent > 0 ? <Text tone="muted">{t('today.unsent', { count: unsent })}</Text> : null}
      {quiet && step.kind !== 'withdrawn' && step.kind !== 'finished' ? (
        <Text size="small" tone="muted">
          {t('today.caution', { number: clearance.site.emergencyNumber })}
        </Text>
      ) : null}
    </ParticipantShell>
  );
}

function Footer({ today }: { today: Extract<Today, { state: 'ready' }> }) {
  const { t } = useTranslation('clearance');
  const router = useRouter();
  const { step } = today;
  return (
    <View style={{ gap: space[3] }}>
      {step.main ? (
        <Button
          label={t(`today.go.${step.main.word}`)}
          size="large"
          grow
          onPress={() => router.push(step.main?.href ?? '/today')}
          {...(step.main.word === 'check' ? { reason: t('today.goNote.check') } : {})}
        />
      ) : null}
      {step.second ? <Button label={t(`today.go.${step.second.word}`)} kind="secondary" grow onPress={() => router.push(step.second?.href ?? '/help')} /> : null}
    </View>
  );
}
