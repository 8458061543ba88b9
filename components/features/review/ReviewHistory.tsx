/**
 * Earlier reviews of the same person, newest first.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { usePages } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Notice } from '@/components/ui/Notice';
import { FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { listReviews } from '@/shared/contracts/worklist';

export function ReviewHistory({ participantId }: { participantId: string }) {
  const { t } = useTranslation('review');
  const format = useFormat();
  const list = usePages(listReviews, { params: { participantId }, query: {} });
  const reviews = list.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <Card heading={t('history.title')}>
      <View style={{ gap: space[4] }}>
        {list.isPending ? <LoadingState /> : null}
        {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
        {list.data && reviews.length === 0 ? <Text tone="muted">{t('history.empty')}</Text> : null}
        {reviews.map((review) => (
          <View key={review.id} style={{ gap: space[1] }}>
            <Text size="small" tone="muted">
              {t('history.head', { by: review.by, at: format.dayTime(review.at) })}
            </Text>
            {review.isIntact ? null : (
              <Notice tone="stop" title={t('history.notValid')}>
                {t('history.notValidHelp')}
              </Notice>
            )}
            <Text weight="bold">{t(`decision.${review.decision}`)}</Text>
            <Text>{review.finding}</Text>
            <Text tone="muted">{review.reason}</Text>
            {review.grading ? (
              <Text size="small">
                {t('history.grading', {
                  severity: t(`grading.severities.${review.grading.severity}`),
                  causality: t(`grading.causalities.${review.grading.causality}`),
                })}
              </Text>
            ) : null}
          </View>
        ))}
        {list.hasNextPage ? (
          <Button kind="quiet" flush label={t('history.older')} onPress={() => void list.fetchNextPage()} />
        ) : null}
      </View>
    </Card>
  );
}
