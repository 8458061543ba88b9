/**
 * One's own sessions with what was felt after each, newest first, and what is still to be written. It must not praise or count.
 */
import { useRouter, type Href } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { usePages } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { useUnsent } from '@/components/runtime/unsent';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { ButtonLink, Link } from '@/components/ui/Link';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import type { AnswerOf } from '@/shared/contracts/contract';
import { listDiary } from '@/shared/contracts/session';

type Row = AnswerOf<typeof listDiary>['items'][number];

export function DiaryListScreen() {
  const { t } = useTranslation('diary');
  const list = usePages(listDiary, { query: {} });
  const { count } = useUnsent();
  const rows = list.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <ParticipantShell title={t('list.title')} tab="diary">
      {count > 0 ? <Text tone="muted">{t('list.unsent', { count })}</Text> : null}
      {list.isPending ? <LoadingState lines={5} /> : null}
      {list.isError && rows.length === 0 ? (
        <FailedState title={t('list.failed')} detail={t('list.failedDetail')} onRetry={() => void list.refetch()} />
      ) : null}
      {list.isSuccess && rows.length === 0 ? (
        <EmptyState title={t('list.empty')}>{t('list.emptyText')}</EmptyState>
      ) : null}
      <View role="list" style={{ gap: space[3] }}>
        {rows.map((row) => (
          <View role="listitem" key={row.sessionId}>
            <DiaryRowCard row={row} />
          </View>
        ))}
      </View>
      {list.hasNextPage ? (
        <Button
          kind="plain"
          grow
          label={t('list.more')}
          busy={list.isFetchingNextPage}
          onPress={() => void list.fetchNextPage()}
        />
      ) : null}
    </ParticipantShell>
  );
}

function DiaryRowCard({ row }: { row: Row }) {
  const { t } = useTranslation('diary');
  const format = useFormat();
  const router = useRouter();
  const after = row.diary?.after;
  const felt =
    after?.effects.map((effect) => t('list.effect', { what: t(`effect.${effect.kind}`), strength: effect.strength })) ??
    [];
  const minutes = row.deliveredMinutes === null ? null : format.number(row.deliveredMinutes, 0);
  return (
    <Card
      heading={t('list.session', { number: row.number, day: format.day(row.startedAt) })}
      note={
        minutes === null
          ? t('list.open')
          : t('list.delivered', { minutes, milliamp: format.number(row.intensityMilliamp) })
      }
    >
      {after ? (
        <View style={{ gap: space[1] }}>
          <Text>{felt.length > 0 ? felt.join(' · ') : t('list.nothing')}</Text>
          <Text size="small" tone="muted">
            {t('list.skin', { skin: t(`skin.${after.skin}`) })}
          </Text>
          {after.headacheAfter > 0 ? (
            <Text size="small" tone="muted">
              {t('list.headache', { strength: after.headacheAfter })}
            </Text>
          ) : null}
        </View>
      ) : (
        <ButtonLink kind="secondary" href={`/diary/${row.sessionId}` satisfies Href} label={t('list.write')} grow />
      )}
      {row.nextDayDue ? (
        <Button
          kind="secondary"
          grow
          label={t('list.nextDay')}
          onPress={() => router.push(`/diary/${row.sessionId}?kind=next_day`)}
        />
      ) : null}
      <Link
        href={`/receipt/${row.sessionId}`}
        size="small"
        accessibleLabel={t('list.receiptOf', { number: row.number })}
      >
        {t('list.receipt')}
      </Link>
    </Card>
  );
}
