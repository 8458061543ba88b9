/**
 * The receipt: what the server computed as delivered, what the diary opened, when the next session may be. What only this phone has is said
 * to be so.
 */
import { useLocalSearchParams, useRouter } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { Strip } from '@/components/features/course/pictures/Strip';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { useRead } from '@/components/runtime/api';
import { useFormat, type Format } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { useUnsent } from '@/components/runtime/unsent';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Definition, type DefinitionRow } from '@/components/ui/Definition';
import { Link } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';
import { FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { readCourse } from '@/shared/contracts/course';
import { readSession, type SessionView } from '@/shared/contracts/session';
import { EmergencyAdvice } from './pictures/EmergencyAdvice';

/** While parts of the record are on their way the page looks again this often. Own choice. */
const everyMs = 5000;

export function ReceiptScreen() {
  const { t } = useTranslation('session');
  const router = useRouter();
  const { sessionId } = useLocalSearchParams<{ sessionId: string }>();
  const unsent = useUnsent();
  const session = useRead(readSession, { params: { sessionId }, everyMs });
  const toToday = <Button size="large" grow label={t('receipt.toToday')} onPress={() => router.replace('/today')} />;
  if (session.data) return <Receipt session={session.data} unsent={unsent.count} />;
  if (unsent.count > 0 && session.failureReason?.offline) {
    return (
      <ParticipantShell title={t('receipt.title.waiting')} tab="diary" footer={toToday}>
        <Text>{t('receipt.waitingText')}</Text>
      </ParticipantShell>
    );
  }
  return (
    <ParticipantShell title={t(session.isError ? 'receipt.failed' : 'receipt.loading')} tab="diary" footer={toToday}>
      {session.isError ? (
        <FailedState title={t('receipt.failed')} onRetry={() => void session.refetch()} />
      ) : (
        <LoadingState lines={4} />
      )}
    </ParticipantShell>
  );
}

type Translate = ReturnType<typeof useTranslation>['t'];

function nextWords(session: SessionView, now: string, format: Format, t: Translate): string {
  const { nextFrom } = session;
  if (nextFrom === null) return t('receipt.nextOpen');
  const near = format.nearDay(nextFrom, now);
  const values = { day: format.day(nextFrom), time: format.time(nextFrom) };
  return t('receipt.next', {
    when: t(`receipt.when.${near === 'today' || near === 'tomorrow' ? near : 'other'}`, values),
  });
}

/** "Recorded. 20 minutes at 2 mA delivered. Next: tomorrow after 16:00." */
function sentenceOf(session: SessionView, now: string, format: Format, t: Translate): string {
  const { delivered, dose } = session;
  if (delivered === null) return t('receipt.openText');
  const amount =
    delivered.completeness === 'not_delivered' && delivered.minutes === 0
      ? t('receipt.notDelivered')
      : t('receipt.delivered', {
          minutes: format.number(delivered.minutes, 0),
          milliamp: format.number(dose.intensityMilliamp),
        });
  return `${amount} ${nextWords(session, now, format, t)}`;
}

function rowsOf(session: SessionView, format: Format, t: Translate): DefinitionRow[] {
  const { delivered, dose, diary } = session;
  if (delivered === null) return [];
  const gapSeconds = delivered.gaps.reduce((sum, gap) => sum + gap.toSeconds - gap.fromSeconds, 0);
  return [
    {
      label: t('receipt.dose'),
      value: t('receipt.doseValue', {
        minutes: format.number(delivered.minutes, 1),
        planned: format.number(dose.minutes, 1),
      }),
    },
    {
      label: t('receipt.charge'),
      value: t('receipt.chargeValue', { coulomb: format.number(delivered.chargeCoulomb) }),
    },
    ...(delivered.gaps.length > 0
      ? [
          {
            label: t('receipt.gaps'),
            value: t('receipt.gapsValue', { count: delivered.gaps.length, seconds: format.number(gapSeconds, 0) }),
          },
        ]
      : []),
    ...(diary ? [{ label: t('receipt.diary'), value: t('receipt.diaryDone') }] : []),
  ];
}

function Receipt({ session, unsent }: { session: SessionView; unsent: number }) {
  const { t } = useTranslation('session');
  const router = useRouter();
  const me = useMe();
  const format = useFormat(session.zone);
  const course = useRead(readCourse, { params: { courseId: session.courseId } });
  const lockouts = [...(session.diary?.lockouts ?? []), ...(session.nextDay?.lockouts ?? [])].filter(
    ({ level }) => level !== 'flag',
  );
  const safety = lockouts.find(({ level }) => level === 'safety');
  const isOpen = session.delivered === null || unsent > 0;
  const { site } = session;
  return (
    <ParticipantShell
      title={t(isOpen ? 'receipt.title.open' : 'receipt.title.recorded')}
      lead={sentenceOf(session, me?.now ?? session.endedAt ?? '', format, t)}
      date={t('receipt.session', { number: session.number, total: session.of })}
      tab="diary"
      footer={<Button size="large" grow label={t('receipt.toToday')} onPress={() => router.replace('/today')} />}
    >
      {safety ? (
        <EmergencyAdvice
          code={safety.code}
          emergencyNumber={site.emergencyNumber}
          siteName={site.name}
          phone={site.phone}
        />
      ) : null}
      {lockouts.length > 0 ? (
        <Notice
          tone="stop"
          title={t('receipt.held')}
          actions={
            <Link href={`tel:${site.phone.replace(/[^+0-9]/g, '')}`} external>
              {t('receipt.call', { name: site.name, phone: site.phone })}
            </Link>
          }
        >
          {t('receipt.heldText')}
        </Notice>
      ) : null}
      {session.delivered ? (
        <Card>
          <Definition rows={rowsOf(session, format, t)} />
        </Card>
      ) : null}
      {course.data ? (
        <Card>
          <Strip marks={course.data.marks} size="card" zone={session.zone} />
        </Card>
      ) : null}
    </ParticipantShell>
  );
}
