/**
 * The people whom a caregiver helps, with what each shares and nothing else; and the caregiver's own code.
 */
import { useRouter } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Strip } from '@/components/features/course/pictures/Strip';
import { CaregiverShell } from '@/components/layout/CaregiverShell';
import { usePages } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Definition } from '@/components/ui/Definition';
import { Link } from '@/components/ui/Link';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { readShared, type SharedPerson } from '@/shared/contracts/caregiver';
import { CodeCard } from './CodeCard';

export function SharedScreen() {
  const { t } = useTranslation('caregiver');
  const list = usePages(readShared, { query: {} });
  const people = list.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <CaregiverShell title={t('shared.title')}>
      {list.isPending ? <LoadingState /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {list.data && people.length === 0 ? <EmptyState title={t('shared.empty')}>{t('shared.emptyHelp')}</EmptyState> : null}
      {people.map((person) => (
        <PersonCard key={person.caregiverId} person={person} />
      ))}
      {people.some((person) => person.assisted) ? <CodeCard /> : null}
    </CaregiverShell>
  );
}

function PersonCard({ person }: { person: SharedPerson }) {
  const { t } = useTranslation('caregiver');
  const router = useRouter();
  const format = useFormat(person.zone);
  return (
    <Card heading={person.firstName} note={person.siteName}>
      <View style={{ gap: space[4] }}>
        {person.course ? (
          <>
            <Strip marks={person.course.marks} size="card" zone={person.zone} />
            <Definition
              layout="rows"
              rows={[
                { label: t('shared.done'), value: t('shared.doneValue', { complete: person.course.adherence.complete, planned: person.course.adherence.planned }) },
                ...(person.course.nextFrom ? [{ label: t('shared.next'), value: format.dayTime(person.course.nextFrom) }] : []),
              ]}
            />
          </>
        ) : (
          <Text tone="muted">{t('shared.nothing', { name: person.firstName })}</Text>
        )}
        {person.assisted ? <Text>{t('shared.assisted', { name: person.firstName })}</Text> : null}
        {person.shares.diary ? (
          <Button
            kind="secondary"
            grow
            label={t('shared.diary')}
            accessibleLabel={t('shared.diaryOf', { name: person.firstName })}
            onPress={() => router.push({ pathname: '/shared/[participantId]', params: { participantId: person.participantId } })}
          />
        ) : null}
        <Text tone="muted">{t('shared.emergency', { number: person.emergencyNumber })}</Text>
        <Link href={`tel:${person.sitePhone.replace(/[^+0-9]/g, '')}`} external>
          {t('shared.call', { name: person.siteName, phone: person.sitePhone })}
        </Link>
      </View>
    </Card>
  );
}
