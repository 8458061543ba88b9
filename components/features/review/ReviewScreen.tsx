/**
 * One row of the worklist, looked at: what happened, the course, the session and the diary behind it, then finding, decision,
 * reason and signature.
 */
import { useLocalSearchParams } from 'expo-router';
import { useTranslation } from 'react-i18next';
import type { ReactNode } from 'react';
import { View } from 'react-native';
import { Strip } from '@/components/features/course/pictures/Strip';
import { sentenceOf } from '@/components/features/worklist/pictures/why';
import { StaffShell } from '@/components/layout/StaffShell';
import { usePages, useRead } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { Card } from '@/components/ui/Card';
import { ButtonLink } from '@/components/ui/Link';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { space, useTheme } from '@/components/ui/theme';
import { readParticipant } from '@/shared/contracts/participant';
import { readWorklist, type WorklistItem } from '@/shared/contracts/worklist';
import { ReviewForm } from './ReviewForm';
import { ReviewHistory } from './ReviewHistory';

const whole = { whose: 'all', limit: 100 } as const;
const sideBySideRem = 26;

export function ReviewScreen() {
  const { t } = useTranslation('review');
  const { itemId = '' } = useLocalSearchParams<{ itemId: string }>();
  const list = usePages(readWorklist, { query: whole });
  const item = list.data?.pages.flatMap((page) => page.items).find((one) => one.id === itemId);
  const shell = (content: ReactNode) => (
    <StaffShell title={t('title')} place="worklist" crumbs={[{ label: t('common:nav.worklist'), href: '/worklist' }]}>
      {content}
    </StaffShell>
  );
  if (list.isError) return shell(<FailedState onRetry={() => void list.refetch()} />);
  if (list.isPending) return shell(<LoadingState lines={6} />);
  if (item) return <Page item={item} />;
  if (list.hasNextPage) {
    if (!list.isFetchingNextPage) void list.fetchNextPage();
    return shell(<LoadingState lines={6} />);
  }
  return shell(
    <EmptyState title={t('gone')} action={<ButtonLink href="/worklist" kind="secondary" label={t('back')} />}>
      {t('goneHelp')}
    </EmptyState>,
  );
}

function Page({ item }: { item: WorklistItem }) {
  const { t } = useTranslation('review');
  const { rem } = useTheme();
  const person = useRead(readParticipant, { params: { participantId: item.participantId } });
  const format = useFormat(person.data?.zone);
  const toPerson = { pathname: '/participants/[participantId]' as const, params: { participantId: item.participantId } };
  return (
    <StaffShell
      title={item.name}
      place="worklist"
      crumbs={[{ label: t('common:nav.worklist'), href: '/worklist' }, { label: item.code, href: toPerson }]}
      subtitle={t('since', { at: format.dayTime(item.openedAt) })}
      actions={
        <>
          <ButtonLink href={toPerson} kind="secondary" label={t('openPerson')} />
          <ButtonLink href={{ pathname: '/participants/[participantId]/messages', params: { participantId: item.participantId } }} kind="secondary" label={t('message')} />
          <ButtonLink href={{ pathname: '/participants/[participantId]/prescription', params: { participantId: item.participantId } }} kind="secondary" label={t('amend')} />
        </>
      }
    >
      <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[6], alignItems: 'flex-start' }}>
        <View style={{ flexGrow: 1, flexShrink: 1, flexBasis: rem(sideBySideRem), gap: space[5] }}>
          <Card heading={t(`worklist:level.${item.level}`)} edge={item.level === 'safety' || item.level === 'review' ? 'stop' : 'caution'}>
            <View style={{ gap: space[4] }}>
              <Text size="lead">{sentenceOf(item, t)}</Text>
              <Strip marks={item.marks} size="page" zone={format.zone} />
              {item.sessionId ? (
                <ButtonLink
                  href={{ pathname: '/participants/[participantId]/sessions/[sessionId]', params: { participantId: item.participantId, sessionId: item.sessionId } }}
                  kind="secondary"
                  label={t('openSession')}
                />
              ) : null}
              {person.data?.contact ? (
                <Text>{t('call', { phone: person.data.contact.phone, contact: person.data.contact.emergencyContact.name, contactPhone: person.data.contact.emergencyContact.phone })}</Text>
              ) : null}
            </View>
          </Card>
          <ReviewHistory participantId={item.participantId} />
        </View>
        <View style={{ flexGrow: 1, flexShrink: 1, flexBasis: rem(sideBySideRem) }}>
          <ReviewForm item={item} />
        </View>
      </View>
    </StaffShell>
  );
}
