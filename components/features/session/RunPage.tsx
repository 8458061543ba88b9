/**
 * The run's page while there is a session: what it says, draws and offers in each state. Advice stands before all else; Stop never moves.
 */
import { useRouter, type Href } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { EmergencyAdvice } from '@/components/features/session/pictures/EmergencyAdvice';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import type { DeviceSession } from '@/components/runtime/device/stimulator';
import { useFormat } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { useNoNetwork } from '@/components/runtime/online';
import type { RunRow } from '@/components/runtime/phone-store';
import type { RunView, SessionRun } from '@/components/runtime/session-run';
import { useUnsent } from '@/components/runtime/unsent';
import { Button } from '@/components/ui/Button';
import { Live } from '@/components/ui/Live';
import { Notice } from '@/components/ui/Notice';
import { Switch } from '@/components/ui/Switch';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { DemoControls } from './DemoControls';
import { FeelPanel } from './FeelPanel';
import { RunContacts, RunTrapezoid } from './RunPicture';
import { runPictureOf, type RunPicture } from './run-view';
import { useCues } from './use-cues';
import { useWakeLock } from './use-wake-lock';

export interface RunPageProps {
  view: RunView;
  run: RunRow;
  device: DeviceSession;
  session: SessionRun;
}

function useRunWords(picture: RunPicture) {
  const { t } = useTranslation('session');
  const format = useFormat();
  const { sentence } = picture;
  const count = 'count' in sentence ? sentence.count : 0;
  return {
    title: t(`run.title.${sentence.key}`, { count }),
    line: t(`run.line.${picture.line}`, {
      milliamp: format.fixed(picture.currentMilliamp, 1),
      seconds: Math.max(0, Math.ceil(picture.pauseSecondsLeft ?? 0)),
    }),
  };
}

export function RunPage({ view, run, device, session }: RunPageProps) {
  const { t } = useTranslation('session');
  const me = useMe();
  const { isOffline } = useUnsent();
  const isNetworkGone = useNoNetwork() || isOffline;
  const [isFeelOpen, setFeelOpen] = useState(false);
  const [noted, setNoted] = useState<string | null>(null);
  const picture = runPictureOf(device);
  const words = useRunWords(picture);
  const cues = useCues(me?.account.id ?? null, picture.line);
  useWakeLock(!picture.isOver);
  const contacts = view.device?.contacts ?? [];

  return (
    <ParticipantShell
      title={words.title}
      titleSize="huge"
      lead={words.line}
      date={t('run.number', { number: run.sessionNumber, total: run.sessionsTotal })}
      headEnd={isNetworkGone ? <Tag bare label={t('run.offline')} /> : undefined}
      hideTabs
      footer={picture.isOver ? <Over run={run} session={session} /> : <Stop picture={picture} session={session} />}
    >
      {/* Each minute and each change; the last minute is said once, not second by second. */}
      <Live hidden>{picture.sentence.key === 'seconds' ? t('run.lastMinute') : words.title}</Live>
      {run.advice ? (
        <EmergencyAdvice
          code={run.advice}
          emergencyNumber={run.site.emergencyNumber}
          siteName={run.site.name}
          phone={run.site.phone}
        />
      ) : null}
      <RunTrapezoid picture={picture} session={device} />
      {picture.isOver ? <EndNote device={device} /> : null}
      {picture.isOver ? null : (
        <>
          <RunContacts contacts={contacts} onAttended={(position) => session.stimulator()?.attend(position)} />
          {/* On the page before its text is, but without a gap of its own. */}
          <View style={noted ? { gap: space[2] } : {}}>
            {isFeelOpen ? (
              <FeelPanel
                onFeel={(kind, strength) => {
                  session.feel(kind, strength);
                  setNoted(t('feel.noted', { what: t(`diary:effect.${kind}`), strength }));
                  setFeelOpen(false);
                }}
                onRaise={(flag) => {
                  session.raise(flag);
                  setFeelOpen(false);
                }}
                onClose={() => setFeelOpen(false)}
              />
            ) : (
              <Button kind="secondary" grow label={t('run.feel')} expanded={false} onPress={() => setFeelOpen(true)} />
            )}
            <Live>{noted ? <Text tone="muted">{noted}</Text> : null}</Live>
          </View>
          {picture.mayGoOn ? (
            <GoOn session={session} contactIsGood={contacts.every(({ grade }) => grade === 'good')} />
          ) : null}
          {picture.mayPause ? (
            <Button kind="plain" grow label={t('run.pause')} onPress={() => session.pause()} />
          ) : null}
          <Switch label={t('run.cues')} value={cues.isOn} onChange={cues.change} />
          {me?.demo ? <DemoControls session={session} speed={view.speed} position={contacts[0]?.position} /> : null}
        </>
      )}
    </ParticipantShell>
  );
}

function Stop({ picture, session }: { picture: RunPicture; session: SessionRun }) {
  const { t } = useTranslation('session');
  return (
    <Button
      kind="stop"
      size="large"
      grow
      label={t('run.stop')}
      reason={t(picture.isStopping ? 'run.stopping' : 'run.stopNote', { seconds: picture.fadeSeconds })}
      onPress={() => session.stop()}
    />
  );
}

function GoOn({ session, contactIsGood }: { session: SessionRun; contactIsGood: boolean }) {
  const { t } = useTranslation('session');
  return (
    <Button
      grow
      label={t('run.goOn')}
      disabled={!contactIsGood}
      reason={contactIsGood ? undefined : t('run.goOnWaits')}
      onPress={() => session.resume()}
    />
  );
}

function EndNote({ device }: { device: DeviceSession }) {
  const { t } = useTranslation('session');
  const why = device.endedWhy ?? 'stopped';
  return (
    <Notice tone={why === 'complete' ? 'steady' : 'info'} word={t('run.endWord')} title={t(`run.end.${why}`)}>
      {t('run.endNext')}
    </Notice>
  );
}

function Over({ run, session }: { run: RunRow; session: SessionRun }) {
  const { t } = useTranslation('session');
  const router = useRouter();
  const { count } = useUnsent();
  return (
    <View style={{ gap: space[2] }}>
      <Button
        size="large"
        grow
        label={t('run.toDiary')}
        reason={count > 0 ? t('run.unsent') : undefined}
        onPress={() => {
          void session.leave();
          router.replace(`/diary/${run.sessionId}` satisfies Href);
        }}
      />
    </View>
  );
}
