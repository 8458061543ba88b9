/**
 * The run: time left, the trapezoid, contact, and Stop, which is on the page in every state, full width, at the bottom, without a question.
 * Nothing here needs a network.
 */
import { useRouter, type Href } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { useSessionRun } from '@/components/runtime/use-session-run';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { EmptyState, LoadingState } from '@/components/ui/States';
import { RunPage } from './RunPage';

export function RunScreen() {
  const { t } = useTranslation('session');
  const router = useRouter();
  const { view, session } = useSessionRun();
  const stop = <Button kind="stop" size="large" grow label={t('run.stop')} onPress={() => session?.stop()} />;
  const device = view.device?.session;

  if (view.phase === 'unknown') {
    return (
      <ParticipantShell title={t('run.looking')} hideTabs footer={stop}>
        <LoadingState lines={2} />
      </ParticipantShell>
    );
  }
  if (view.phase === 'elsewhere') {
    return (
      <ParticipantShell title={t('elsewhere.title')} hideTabs footer={stop}>
        <Notice
          title={t('elsewhere.what')}
          actions={<Button kind="secondary" label={t('elsewhere.take')} onPress={() => void session?.open('take')} />}
        >
          {t('elsewhere.text')}
        </Notice>
      </ParticipantShell>
    );
  }
  if (view.phase === 'unkept') {
    return (
      <ParticipantShell title={t('run.unkept')} hideTabs footer={stop}>
        <Notice tone="stop" title={t('run.unkeptWhat')} announce="assertive">
          {t('run.unkeptText')}
        </Notice>
      </ParticipantShell>
    );
  }
  if (session === null || view.run === null || !device) {
    const toToday = (
      <Button size="large" grow label={t('run.toToday')} onPress={() => router.replace('/today' satisfies Href)} />
    );
    return (
      <ParticipantShell title={t('run.none')} tab="today" footer={toToday}>
        <EmptyState title={t('run.noneWhat')}>{t('run.noneText')}</EmptyState>
      </ParticipantShell>
    );
  }
  return <RunPage view={view} run={view.run} device={device} session={session} />;
}
