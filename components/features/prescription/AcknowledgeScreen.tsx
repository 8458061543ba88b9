/**
 * The prescription in plain words, what changed since the last one, and the participant's "I have read this".
 */
import { useRouter } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Trapezoid } from '@/components/features/session/pictures/Trapezoid';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { useCall, usePages, useRead } from '@/components/runtime/api';
import { useFormat, type Format } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Definition, type DefinitionRow } from '@/components/ui/Definition';
import { Notice } from '@/components/ui/Notice';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { readClearance } from '@/shared/contracts/clearance';
import { acknowledgePrescription, listPrescriptions, type PrescriptionView } from '@/shared/contracts/prescription';

type Translate = ReturnType<typeof useTranslation>['t'];

function rowsOf(view: PrescriptionView, format: Format, t: Translate): DefinitionRow[] {
  const { dose, schedule } = view;
  const days = schedule.days.map((day) => t(`acknowledge.weekday.${day}`)).join(', ');
  return [
    { label: t('acknowledge.strength'), value: t('acknowledge.strengthValue', { intensity: format.number(dose.intensityMilliamp) }) },
    { label: t('acknowledge.length'), value: t('acknowledge.lengthValue', { hold: format.number(dose.holdSeconds / 60, 1), all: format.number(view.computed.minutes, 1) }) },
    {
      label: t('acknowledge.where'),
      value: dose.electrodes.map((electrode) => t(`acknowledge.pad.${electrode.polarity}`, { position: electrode.position })).join('; '),
    },
    { label: t('acknowledge.days'), value: days },
    { label: t('acknowledge.hours'), value: t('acknowledge.hoursValue', { from: schedule.hoursFrom, to: schedule.hoursTo }) },
    { label: t('acknowledge.gap'), value: t('acknowledge.gapValue', { hours: format.number(schedule.minGapHours, 0) }) },
    { label: t('acknowledge.count'), value: t('acknowledge.countValue', { count: schedule.sessionsTotal }) },
    { label: t('acknowledge.helper'), value: t(view.assisted ? 'acknowledge.helperYes' : 'acknowledge.helperNo') },
  ];
}

export function AcknowledgeScreen() {
  const { t } = useTranslation('participant');
  const me = useMe();
  const list = usePages(listPrescriptions, { params: { participantId: me?.participant?.id ?? '' }, query: { limit: 5 }, enabled: me?.participant !== null && me !== null });
  const clearance = useRead(readClearance, { query: {} });
  const versions = list.data?.pages.flatMap((page) => page.items) ?? [];
  const current = versions.find((version) => version.status === 'signed');
  const before = versions.find((version) => version.id === current?.amendsId);
  if (list.isError || clearance.isError) {
    return (
      <ParticipantShell title={t('acknowledge.title')}>
        <FailedState onRetry={() => void Promise.all([list.refetch(), clearance.refetch()])} />
      </ParticipantShell>
    );
  }
  if (list.isPending || clearance.isPending) {
    return (
      <ParticipantShell title={t('acknowledge.title')}>
        <LoadingState lines={6} />
      </ParticipantShell>
    );
  }
  if (!current) {
    return (
      <ParticipantShell title={t('acknowledge.title')}>
        <EmptyState title={t('acknowledge.none')}>{t('acknowledge.noneHelp')}</EmptyState>
      </ParticipantShell>
    );
  }
  return <Page current={current} before={before ?? null} />;
}

function Page({ current, before }: { current: PrescriptionView; before: PrescriptionView | null }) {
  const { t } = useTranslation('participant');
  const format = useFormat();
  const router = useRouter();
  const acknowledge = useCall(acknowledgePrescription);
  const isDue = current.acknowledgedAt === null;
  const rows = rowsOf(current, format, t);
  const old = before ? rowsOf(before, format, t) : [];
  const changed = rows.flatMap((row, index) => (old[index] && old[index].value !== row.value ? [{ ...row, hint: t('acknowledge.was', { value: String(old[index].value) }) }] : []));
  const confirm = async () => {
    await acknowledge.mutateAsync({ params: { prescriptionId: current.id }, body: {} });
    router.replace('/today');
  };
  const signer = current.signatures[0];
  return (
    <ParticipantShell
      title={isDue ? t('acknowledge.dueTitle') : t('acknowledge.title')}
      {...(signer && current.signedAt ? { lead: t('acknowledge.signed', { name: signer.name, day: format.day(current.signedAt) }) } : {})}
      footer={
        isDue ? (
          <Button label={t('acknowledge.go')} size="large" grow busy={acknowledge.isPending} onPress={() => void confirm().catch(() => undefined)} />
        ) : (
          <Button label={t('acknowledge.back')} kind="secondary" grow onPress={() => router.replace('/today')} />
        )
      }
    >
      {acknowledge.error ? <Notice tone="stop" title={acknowledge.error.offline ? t('offline') : acknowledge.error.problem.detail} announce="assertive" /> : null}
      {changed.length > 0 ? (
        <Notice tone="caution" title={t('acknowledge.changed')}>
          <Definition rows={changed} layout="stack" />
          {current.reason ? <Text>{t('acknowledge.why', { reason: current.reason })}</Text> : null}
        </Notice>
      ) : null}
      <Card heading={t('acknowledge.session')} aside={t('acknowledge.inAll', { minutes: format.number(current.computed.minutes, 1) })}>
        <View style={{ gap: space[4] }}>
          <Trapezoid
            size="card"
            intensityMilliamp={current.dose.intensityMilliamp}
            rampUpSeconds={current.dose.rampUpSeconds}
            holdSeconds={current.dose.holdSeconds}
            rampDownSeconds={current.dose.rampDownSeconds}
            label={t('acknowledge.picture', { intensity: format.number(current.dose.intensityMilliamp), minutes: format.number(current.dose.holdSeconds / 60, 1) })}
          />
          <Definition rows={rows} layout="rows" ruled />
        </View>
      </Card>
      <Text tone="muted">{t('acknowledge.ask')}</Text>
    </ParticipantShell>
  );
}
