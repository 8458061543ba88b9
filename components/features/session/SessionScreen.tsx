/**
 * One session as staff see it: planned and delivered, the curve, contact, what was felt during and after, photos, gaps.
 */
import { useLocalSearchParams } from 'expo-router';
import { useTranslation } from 'react-i18next';
import type { ComponentProps } from 'react';
import { View } from 'react-native';
import { StaffShell } from '@/components/layout/StaffShell';
import { useRead } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { Card } from '@/components/ui/Card';
import { Definition } from '@/components/ui/Definition';
import { Notice } from '@/components/ui/Notice';
import { FailedState, LoadingState } from '@/components/ui/States';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import { space, useTheme, type StateTone } from '@/components/ui/theme';
import { readParticipant } from '@/shared/contracts/participant';
import { readSession, type SessionView } from '@/shared/contracts/session';
import { DiaryCard } from './DiaryCard';
import { DeliveredCurve } from './pictures/DeliveredCurve';

const columnRem = 28;

export function SessionScreen() {
  const { t } = useTranslation('sessions');
  const { participantId = '', sessionId = '' } = useLocalSearchParams<{ participantId: string; sessionId: string }>();
  const person = useRead(readParticipant, { params: { participantId } });
  const read = useRead(readSession, { params: { sessionId } });
  const crumbs = [
    { label: t('common:nav.participants'), href: '/participants' as const },
    { label: person.data?.name ?? '', href: { pathname: '/participants/[participantId]' as const, params: { participantId } } },
  ];
  // The address names both: a session under somebody else's name must never be shown.
  const isTheirs = read.data?.participantId === participantId;
  if (read.data && isTheirs) return <Page session={read.data} crumbs={crumbs} />;
  return (
    <StaffShell title={t('title')} place="participants" crumbs={crumbs}>
      {read.isError || (read.data && !isTheirs) ? <FailedState onRetry={() => void read.refetch()} /> : <LoadingState lines={8} />}
    </StaffShell>
  );
}

function toneOf(session: SessionView): { tone: StateTone; word: string } {
  if (session.state !== 'closed') return { tone: session.state === 'running' ? 'action' : 'caution', word: session.state };
  const word = session.delivered?.completeness ?? 'not_delivered';
  return { tone: word === 'complete' ? 'steady' : 'caution', word };
}

function Page({ session, crumbs }: { session: SessionView; crumbs: ComponentProps<typeof StaffShell>['crumbs'] }) {
  const { t } = useTranslation('sessions');
  const { rem } = useTheme();
  const format = useFormat(session.zone);
  const { tone, word } = toneOf(session);
  const { delivered, dose } = session;
  const minutes = (seconds: number) => format.number(seconds / 60, 1);
  const half = { flexGrow: 1, flexShrink: 1, flexBasis: rem(columnRem), minWidth: 0, gap: space[5] } as const;
  return (
    <StaffShell
      title={t('number', { number: session.number, of: session.of })}
      place="participants"
      {...(crumbs ? { crumbs } : {})}
      tag={<Tag tone={tone} label={t(`state.${word}`)} />}
      subtitle={session.startedAt ? t('startedAt', { at: format.dayTime(session.startedAt), zone: session.zone }) : t('notStarted')}
    >
      {session.missingSequences.length > 0 ? (
        <Notice tone="caution" title={t('gapTitle')}>
          {t('gap', { count: session.missingSequences.length })}
        </Notice>
      ) : null}
      <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[6], alignItems: 'flex-start' }}>
        <View style={half}>
          <Card heading={t('delivered')}>
            <View style={{ gap: space[5] }}>
              <DeliveredCurve
                curve={session.curve}
                plan={dose}
                label={t('curve', { planned: format.number(dose.chargeCoulomb), delivered: format.number(delivered?.chargeCoulomb ?? 0) })}
                plannedWord={t('planned')}
              />
              <Definition
                layout="rows"
                ruled
                rows={[
                  { label: t('planned'), value: t('plannedValue', { intensity: format.number(dose.intensityMilliamp), minutes: format.number(dose.minutes, 1), charge: format.number(dose.chargeCoulomb) }) },
                  ...(delivered
                    ? [
                        { label: t('delivered'), value: t('deliveredValue', { minutes: format.number(delivered.minutes, 1), charge: format.number(delivered.chargeCoulomb), percent: format.percent(delivered.fraction) }) },
                        { label: t('upper'), value: t('upperValue', { charge: format.number(delivered.upperChargeCoulomb) }), hint: t('upperHint') },
                      ]
                    : []),
                  { label: t('end'), value: session.endReason ? t(`endReason.${session.endReason}`) : t('notEnded') },
                  { label: t('pads'), value: dose.electrodes.map((pad) => t(`pad.${pad.polarity}`, { position: pad.position })).join(', ') },
                ]}
              />
            </View>
          </Card>
          <Card heading={t('contact')}>
            {session.contact.length === 0 ? <Text tone="muted">{t('noContact')}</Text> : null}
            <Definition
              layout="rows"
              rows={session.contact.map((pad) => ({
                label: pad.position,
                value: t('contactValue', { worst: pad.worstKiloohm === null ? t('open') : format.number(pad.worstKiloohm, 1), last: pad.lastKiloohm === null ? t('open') : format.number(pad.lastKiloohm, 1) }),
              }))}
            />
          </Card>
        </View>
        <View style={half}>
          <Card heading={t('during')}>
            {session.sensations.length === 0 && session.pauses.length === 0 ? <Text tone="muted">{t('nothingDuring')}</Text> : null}
            <View role="list" style={{ gap: space[2] }}>
              {session.sensations.map((felt) => (
                <Text role="listitem" key={`${felt.atSeconds} ${felt.sensation}`}>
                  {t('felt', { at: minutes(felt.atSeconds), what: t(`diary:effect.${felt.sensation}`), strength: felt.strength })}
                </Text>
              ))}
              {session.pauses.map((pause) => (
                <Text role="listitem" key={`pause ${pause.atSeconds}`} tone="muted">
                  {t('paused', { at: minutes(pause.atSeconds), seconds: format.number(pause.lengthSeconds, 0) })}
                </Text>
              ))}
            </View>
          </Card>
          <DiaryCard title={t('diary')} diary={session.diary} none={t('noDiary')} zone={session.zone} />
          <DiaryCard title={t('nextDay')} diary={session.nextDay} none={t('noNextDay')} zone={session.zone} />
        </View>
      </View>
    </StaffShell>
  );
}
