/**
 * Set-up: the stimulator, the pads, their contact, Start. It must not start anything by itself, and shows every reason when it may not.
 */
import { Redirect, useRouter } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { RefusalList } from '@/components/features/clearance/pictures/RefusalList';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { FailedState, LoadingState } from '@/components/ui/States';
import type { ClearanceView } from '@/shared/contracts/clearance';
import { ContactStep } from './ContactStep';
import { DeviceStep } from './DeviceStep';
import { PlacementStep } from './PlacementStep';
import { useSetUp, type SetUp } from './use-set-up';

export function SetUpScreen() {
  const { t } = useTranslation('session');
  const setUp = useSetUp();
  const { clearance, ownDevice, keys, view } = setUp;
  if (view.phase === 'running') return <Redirect href="/run" />;
  const failed = [clearance, ownDevice, keys].find((read) => read.isError && read.data === undefined);
  if (failed) {
    return (
      <ParticipantShell title={t('setUp.failed')} tab="today">
        <FailedState title={t('setUp.failed')} detail={t('setUp.failedDetail')} onRetry={() => void failed.refetch()} />
      </ParticipantShell>
    );
  }
  if (!clearance.data || ownDevice.data === undefined || !keys.data || view.phase === 'unknown') {
    return (
      <ParticipantShell title={t('setUp.loading')} tab="today">
        <LoadingState lines={4} />
      </ParticipantShell>
    );
  }
  if (!clearance.data.allowed && clearance.data.livePermitId === null) return <NotYet clearance={clearance.data} />;
  if (view.phase === 'elsewhere') return <Elsewhere setUp={setUp} />;
  if (setUp.step === 0) return <DeviceStep setUp={setUp} clearance={clearance.data} device={ownDevice.data} />;
  if (setUp.step === 1) return <PlacementStep setUp={setUp} clearance={clearance.data} />;
  return <ContactStep setUp={setUp} clearance={clearance.data} />;
}

/** No pre-check, or something else in the way: the same reasons as everywhere, and the way on. */
function NotYet({ clearance }: { clearance: ClearanceView }) {
  const { t } = useTranslation('session');
  const router = useRouter();
  const href = clearance.readyForPrecheck ? '/precheck' : '/today';
  return (
    <ParticipantShell
      title={t(clearance.readyForPrecheck ? 'setUp.checkFirst' : 'setUp.notNow')}
      tab="today"
      footer={
        <Button
          label={t(clearance.readyForPrecheck ? 'setUp.toCheck' : 'setUp.toToday')}
          size="large"
          grow
          onPress={() => router.replace(href)}
        />
      }
    >
      <RefusalList reasons={clearance.reasons} zone={clearance.zone} now={clearance.asOf} />
    </ParticipantShell>
  );
}

function Elsewhere({ setUp }: { setUp: SetUp }) {
  const { t } = useTranslation('session');
  return (
    <ParticipantShell
      title={t('elsewhere.title')}
      tab="today"
      footer={<Button label={t('elsewhere.take')} size="large" grow onPress={() => void setUp.session?.open('take')} />}
    >
      <Notice title={t('elsewhere.what')}>{t('elsewhere.text')}</Notice>
    </ParticipantShell>
  );
}
