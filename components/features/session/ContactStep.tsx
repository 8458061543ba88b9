/**
 * Set-up, last: the contact of each electrode as it is now, and Start. Start asks the server; every reason it gives is shown whole, and so
 * is the stimulator's own.
 */
import { useRouter } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { RefusalList } from '@/components/features/clearance/pictures/RefusalList';
import { ContactCard } from '@/components/features/session/pictures/ContactCard';
import { StepShell } from '@/components/layout/StepShell';
import { Button } from '@/components/ui/Button';
import { Live } from '@/components/ui/Live';
import { Notice } from '@/components/ui/Notice';
import { space } from '@/components/ui/theme';
import type { ClearanceView } from '@/shared/contracts/clearance';
import type { SetUp, StartProblem } from './use-set-up';

export function ContactStep({ setUp, clearance }: { setUp: SetUp; clearance: ClearanceView }) {
  const { t } = useTranslation('device');
  const { contacts, problem } = setUp;
  const isGood = contacts.length > 0 && contacts.every(({ grade }) => grade === 'good');
  return (
    <StepShell
      title={t('contact.title')}
      lead={t('contact.lead')}
      step={{ value: 3, max: 3, label: t('step', { value: 3, max: 3 }) }}
      onBack={setUp.back}
      footer={
        <Button
          label={t(isGood ? 'start.start' : 'start.waiting')}
          size="large"
          grow
          busy={setUp.isBusy}
          busyLabel={t('start.asking')}
          disabled={!isGood}
          reason={isGood ? t('start.note') : t('start.waitingNote')}
          onPress={() => void setUp.start()}
        />
      }
    >
      <View style={{ gap: space[3] }}>
        {contacts.map(({ position, polarity, grade }) => (
          <ContactCard
            key={position}
            position={position}
            polarity={polarity}
            grade={grade}
            onAttended={() => setUp.session?.stimulator()?.attend(position)}
          />
        ))}
      </View>
      <Live hidden>{isGood ? t('contact.allGood') : t('contact.notYet')}</Live>
      {problem ? <StartProblemNotice problem={problem} clearance={clearance} /> : null}
    </StepShell>
  );
}

function StartProblemNotice({ problem, clearance }: { problem: StartProblem; clearance: ClearanceView }) {
  const { t } = useTranslation('device');
  const router = useRouter();
  const help = t('start.help', { name: clearance.site.name, phone: clearance.site.phone });
  if (problem.from === 'network') {
    return (
      <Notice tone="stop" title={t('start.offline')} announce="assertive">
        {t('start.offlineText')}
      </Notice>
    );
  }
  if (problem.from === 'ended') {
    return (
      <Notice tone="caution" title={t('start.ended')} announce="assertive">
        {t('start.endedText')}
      </Notice>
    );
  }
  if (problem.from === 'stimulator') {
    return (
      <Notice tone="stop" title={t('start.deviceRefused')} announce="assertive">
        {`${t(`refusal.${problem.why}`)} ${help}`}
      </Notice>
    );
  }
  const { reasons, code } = problem.problem;
  if (!reasons || reasons.length === 0) {
    return (
      <Notice tone="stop" title={t(code === 'permit.too_many' ? 'start.tooMany' : 'start.failed')} announce="assertive">
        {help}
      </Notice>
    );
  }
  return (
    <View role="alert" style={{ gap: space[3] }}>
      <RefusalList reasons={reasons} zone={clearance.zone} now={clearance.asOf} />
      {reasons.some((reason) => reason.code.startsWith('precheck_')) ? (
        <Button kind="secondary" grow label={t('start.checkAgain')} onPress={() => router.replace('/precheck')} />
      ) : null}
    </View>
  );
}
