/**
 * Everything that happened to one person, newest first.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { usePages } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Link } from '@/components/ui/Link';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { space, stroke, useTheme } from '@/components/ui/theme';
import { readTimeline } from '@/shared/contracts/participant';
import { sentenceOfEntry } from './timeline-words';

export function TimelineCard({ participantId, zone }: { participantId: string; zone: string }) {
  const { t } = useTranslation('participants');
  const { colour } = useTheme();
  const format = useFormat(zone);
  const list = usePages(readTimeline, { params: { participantId }, query: { limit: 25 } });
  const entries = list.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <Card heading={t('timeline.title')}>
      {list.isPending ? <LoadingState lines={6} /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {list.data && entries.length === 0 ? <EmptyState title={t('timeline.empty')} /> : null}
      <View role="list">
        {entries.map((entry) => (
          <View role="listitem" key={`${entry.kind} ${entry.id}`} style={{ gap: space.half, paddingVertical: space[3], borderTopWidth: stroke.hair, borderColor: colour.line }}>
            <Text size="small" tone="muted" digits>
              {entry.by ? t('timeline.headBy', { at: format.dayTime(entry.at), by: entry.by }) : format.dayTime(entry.at)}
            </Text>
            {entry.sessionId ? (
              <Link href={{ pathname: '/participants/[participantId]/sessions/[sessionId]', params: { participantId, sessionId: entry.sessionId } }}>{sentenceOfEntry(entry, format, t)}</Link>
            ) : (
              <Text weight="bold">{sentenceOfEntry(entry, format, t)}</Text>
            )}
          </View>
        ))}
      </View>
      {list.hasNextPage ? <Button kind="quiet" flush label={t('timeline.more')} busy={list.isFetchingNextPage} onPress={() => void list.fetchNextPage()} /> : null}
    </Card>
  );
}
