/**
 * Effects, skin, contact and delivered charge of each session on one time axis. The chart comes in its own chunk.
 */
import { lazy, Suspense } from 'react';
import { useTranslation } from 'react-i18next';
import { easyEnd } from '@/components/features/reporting/pictures/trend-geometry';
import { useRead } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { Card } from '@/components/ui/Card';
import { FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { readTrends } from '@/shared/contracts/participant';

const TrendChart = lazy(() => import('@/components/features/reporting/pictures/TrendChart').then((module) => ({ default: module.TrendChart })));

/** Scales of the rows: as asked (0–10, 0–3); measures end at an easy number above the largest. */
const strongest = 10;
const worstSkin = 3;

export function TrendsCard({ participantId, zone }: { participantId: string; zone: string }) {
  const { t } = useTranslation('participants');
  const format = useFormat(zone);
  const read = useRead(readTrends, { params: { participantId } });
  const points = read.data?.points ?? [];
  const row = (id: string, range: readonly [number, number], value: (point: (typeof points)[number]) => number | null) => ({
    id,
    label: t(`trend.${id}`),
    unit: t(`trend.${id}Unit`),
    range,
    points: points.map((point) => ({ at: Date.parse(point.at), value: value(point) })),
  });
  const most = (value: (point: (typeof points)[number]) => number | null) => easyEnd(Math.max(1, ...points.map((point) => value(point) ?? 0)));
  return (
    <Card heading={t('trend.title')}>
      {read.isPending ? <LoadingState lines={6} /> : null}
      {read.isError ? <FailedState onRetry={() => void read.refetch()} /> : null}
      {read.data && points.length === 0 ? <Text tone="muted">{t('trend.empty')}</Text> : null}
      {points.length > 0 ? (
        <Suspense fallback={<LoadingState lines={6} />}>
          <TrendChart
            label={t('trend.label', { count: points.length })}
            times={points.map((point) => ({ at: Date.parse(point.at), label: format.shortDay(point.at) }))}
            rows={[
              row('headache', [0, strongest], (point) => point.headache),
              row('effect', [0, strongest], (point) => point.worstEffect),
              row('skin', [0, worstSkin], (point) => point.skin),
              row('contact', [0, most((point) => point.worstContactKiloohm)], (point) => point.worstContactKiloohm),
              row('delivered', [0, most((point) => point.plannedCoulomb)], (point) => point.deliveredCoulomb),
            ]}
          />
        </Suspense>
      ) : null}
    </Card>
  );
}
