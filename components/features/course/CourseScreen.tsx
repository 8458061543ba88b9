/**
 * The course: strip, what is prescribed, every session in a list, and the planned times for one's own calendar.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { useRead } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Definition } from '@/components/ui/Definition';
import { Link } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import { space, stroke, useTheme, type StateTone } from '@/components/ui/theme';
import { readCourse, type CourseMark, type CourseView } from '@/shared/contracts/course';
import { saveCalendar } from './calendar-file';
import { Strip } from './pictures/Strip';

export function CourseScreen() {
  const { t } = useTranslation('course');
  const me = useMe();
  const courseId = me?.participant?.courseId ?? null;
  const read = useRead(readCourse, { params: { courseId: courseId ?? '' }, enabled: courseId !== null });
  if (me && courseId === null) {
    return (
      <ParticipantShell title={t('screen.title')} tab="course">
        <EmptyState title={t('screen.empty')}>{t('screen.emptyHelp')}</EmptyState>
      </ParticipantShell>
    );
  }
  if (read.isError) {
    return (
      <ParticipantShell title={t('screen.title')} tab="course">
        <FailedState onRetry={() => void read.refetch()} />
      </ParticipantShell>
    );
  }
  if (!read.data) {
    return (
      <ParticipantShell title={t('screen.title')} tab="course">
        <LoadingState lines={5} />
      </ParticipantShell>
    );
  }
  return <Page course={read.data} now={me?.now ?? ''} />;
}

function Page({ course, now }: { course: CourseView; now: string }) {
  const { t } = useTranslation('course');
  const format = useFormat(course.zone);
  const toCome = course.marks.filter((mark) => mark.state === 'planned' || mark.state === 'next');
  return (
    <ParticipantShell title={t('screen.lead', { done: course.sessionsDone, total: course.sessionsTotal })} tab="course">
      {course.state === 'paused' ? <Notice tone="caution" title={t('screen.paused')} /> : null}
      <Card heading={t('screen.title')}>
        <View style={{ gap: space[4] }}>
          <Strip marks={course.marks} size="page" zone={course.zone} />
          <Definition
            layout="rows"
            rows={[{ label: t('screen.adherence'), value: t('screen.adherenceValue', { complete: course.adherence.complete, planned: course.adherence.planned }) }]}
          />
          <Link href="/acknowledge">{t('screen.read')}</Link>
        </View>
      </Card>
      {toCome.length > 0 ? (
        <View style={{ gap: space[2] }}>
          <Button label={t('screen.add')} kind="secondary" grow reason={t('screen.addHint')} onPress={() => saveCalendar(toCome, t('screen.eventTitle'), now)} />
        </View>
      ) : null}
      <Card heading={t('screen.calendar')}>
        <View role="list">
          {course.marks.map((mark) => (
            <SessionRow key={mark.plannedSessionId} mark={mark} day={format.day(mark.startedAt ?? mark.windowFrom)} time={`${format.time(mark.windowFrom)}–${format.time(mark.windowTo)}`} />
          ))}
        </View>
      </Card>
    </ParticipantShell>
  );
}

const tones: Readonly<Record<CourseMark['state'], StateTone>> = {
  delivered: 'steady',
  partial: 'caution',
  planned: 'muted',
  next: 'action',
  missed: 'muted',
  held: 'stop',
  running: 'action',
  excused: 'muted',
  cancelled: 'muted',
};

function SessionRow({ mark, day, time }: { mark: CourseMark; day: string; time: string }) {
  const { t } = useTranslation('course');
  const { colour } = useTheme();
  const name = (
    <View style={{ flexShrink: 1 }}>
      <Text weight="bold">{day}</Text>
      <Text size="small" tone="muted" digits>
        {t('screen.row', { number: mark.number, time })}
      </Text>
    </View>
  );
  return (
    <View
      role="listitem"
      style={{
        flexDirection: 'row',
        flexWrap: 'wrap',
        justifyContent: 'space-between',
        alignItems: 'center',
        gap: space[2],
        paddingVertical: space[3],
        borderBottomWidth: stroke.hair,
        borderColor: colour.line,
      }}
    >
      {name}
      {mark.sessionId && mark.state !== 'running' ? (
        <Link href={{ pathname: '/receipt/[sessionId]', params: { sessionId: mark.sessionId } }} accessibleLabel={t('screen.openSession', { number: mark.number })}>
          {t(`screen.word.${mark.state}`)}
        </Link>
      ) : (
        <Tag tone={tones[mark.state]} label={t(`screen.word.${mark.state}`)} />
      )}
    </View>
  );
}
