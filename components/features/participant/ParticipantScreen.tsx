/**
 * One person: state and strip on top, what must still stand, charts on one time axis, everything that happened, and what can be done.
 */
import { useLocalSearchParams, useRouter } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Strip } from '@/components/features/course/pictures/Strip';
import { StaffShell } from '@/components/layout/StaffShell';
import { useRead } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { Card } from '@/components/ui/Card';
import { Definition } from '@/components/ui/Definition';
import { ButtonLink } from '@/components/ui/Link';
import { FailedState, LoadingState } from '@/components/ui/States';
import { Tag } from '@/components/ui/Tag';
import { space, useTheme } from '@/components/ui/theme';
import { readParticipant, type ParticipantView } from '@/shared/contracts/participant';
import { stateTones } from './participant-columns';
import { LockoutsCard } from './LockoutsCard';
import { PersonCard } from './PersonCard';
import { ReadinessCard } from './ReadinessCard';
import { TimelineCard } from './TimelineCard';
import { TrendsCard } from './TrendsCard';

const mainRem = 40;
const sideRem = 24;

export function ParticipantScreen() {
  const { t } = useTranslation('participants');
  const { participantId = '' } = useLocalSearchParams<{ participantId: string }>();
  const read = useRead(readParticipant, { params: { participantId } });
  if (read.data) return <Page person={read.data} />;
  return (
    <StaffShell title={t('title')} place="participants" crumbs={[{ label: t('title'), href: '/participants' }]}>
      {read.isError ? (
        <FailedState
          {...(read.error.problem.status === 404 ? { title: t('page.gone'), detail: t('page.goneHelp') } : {})}
          onRetry={() => void read.refetch()}
        />
      ) : (
        <LoadingState lines={8} />
      )}
    </StaffShell>
  );
}

function Page({ person }: { person: ParticipantView }) {
  const { t } = useTranslation('participants');
  const { rem } = useTheme();
  const router = useRouter();
  const me = useMe();
  const format = useFormat(person.zone);
  const writes = me?.account.role === 'clinician' || me?.account.role === 'coordinator';
  const params = { participantId: person.id };
  const { course } = person;
  const open = person.lockouts.find((lockout) => lockout.closedAt === null && lockout.worklistItemId !== null);
  // While a hold stands nothing is next: it has no date.
  const next = course?.marks.find((mark) => mark.state === 'next');
  return (
    <StaffShell
      title={person.name}
      place="participants"
      crumbs={[{ label: t('title'), href: '/participants' }, { label: person.code }]}
      tag={<Tag tone={stateTones[person.state]} label={t(`state.${person.state}`)} />}
      subtitle={t('page.subtitle', { site: person.siteName, age: person.ageYears, zone: person.zone })}
      actions={
        writes ? (
          <>
            <ButtonLink kind="secondary" label={t('page.message')} href={{ pathname: '/participants/[participantId]/messages', params }} />
            <ButtonLink
              kind={open ? 'secondary' : 'primary'}
              label={course?.prescriptionId ? t('page.amend') : t('page.prescribe')}
              href={{ pathname: '/participants/[participantId]/prescription', params }}
            />
            {open?.worklistItemId ? <ButtonLink label={t('page.review')} href={{ pathname: '/review/[itemId]', params: { itemId: open.worklistItemId } }} /> : null}
          </>
        ) : null
      }
    >
      {course ? (
        <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[6], alignItems: 'flex-end' }}>
          <View style={{ flexGrow: 1, flexShrink: 1, flexBasis: rem(mainRem) }}>
            <Strip
              marks={course.marks}
              size="page"
              zone={person.zone}
              onPressMark={(mark) => {
                if (mark.sessionId) router.push({ pathname: '/participants/[participantId]/sessions/[sessionId]', params: { ...params, sessionId: mark.sessionId } });
              }}
            />
          </View>
          <Definition
            layout="columns"
            rows={[
              {
                label: t('column.adherence'),
                value: t('ofPlanned', { complete: course.adherence.complete, planned: course.adherence.planned }),
                ...(course.adherence.interval ? { hint: t('interval', { low: format.percent(course.adherence.interval.low), high: format.percent(course.adherence.interval.high) }) } : {}),
              },
              ...(course.dose ? [{ label: t('column.prescribed'), value: t('prescribed', { intensity: format.number(course.dose.intensityMilliamp), minutes: format.number(course.dose.minutes, 0) }) }] : []),
              ...(next ? [{ label: t('column.next'), value: format.dayTime(next.windowFrom) }] : []),
            ]}
          />
        </View>
      ) : null}
      <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[6], alignItems: 'flex-start' }}>
        <View style={{ flexGrow: 3, flexShrink: 1, flexBasis: rem(mainRem), gap: space[5], minWidth: 0 }}>
          <LockoutsCard person={person} />
          {course && course.sessionsDone > 0 ? <TrendsCard participantId={person.id} zone={person.zone} /> : null}
          <ReadinessCard person={person} writes={writes} />
          {person.contact ? <PersonCard person={person} writes={writes} /> : null}
        </View>
        <View style={{ flexGrow: 1, flexShrink: 1, flexBasis: rem(sideRem), minWidth: 0 }}>
          <TimelineCard participantId={person.id} zone={person.zone} />
        </View>
      </View>
      {course ? null : <Card ground="sunken" heading={t('noCourse')} note={t('page.noCourseHelp')} />}
    </StaffShell>
  );
}
