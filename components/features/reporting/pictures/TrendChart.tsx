/**
 * A few measures as lines over one axis of time, and the same numbers as a table for those who read instead of look. It
 * must not compute a trend or a mean: it draws what was recorded.
 */
import { useState } from 'react';
import { View, type LayoutChangeEvent } from 'react-native';
import { useTranslation } from 'react-i18next';
import { TrendLine } from '@/components/features/reporting/pictures/TrendLine';
import { fittingLabels, type TrendPoint } from '@/components/features/reporting/pictures/trend-geometry';
import { Button } from '@/components/ui/Button';
import { Table } from '@/components/ui/Table';
import { Text } from '@/components/ui/Text';
import { VisuallyHidden } from '@/components/ui/VisuallyHidden';
import { space, useTheme, type StateTone } from '@/components/ui/theme';

export interface TrendRow {
  id: string;
  label: string;
  /** "0–10", "C": shown under the label. */
  unit: string;
  /** Lowest and highest value of the scale. */
  range: readonly [number, number];
  points: readonly TrendPoint[];
  tone?: StateTone;
}

export interface TrendChartProps {
  /** All rows in one sentence: what is shown, from when to when. */
  label: string;
  rows: readonly TrendRow[];
  /** Instants that carry a label on the axis; usually one a session. */
  times: readonly { at: number; label: string }[];
}

/** Own choice: the order in which rows without a tone take one; lines are told apart by their row, not by colour. */
const tones: readonly StateTone[] = ['action', 'caution', 'steady', 'stop'];

function TrendTable({ rows, times, label }: TrendChartProps) {
  const { t, i18n } = useTranslation('common');
  const format = new Intl.NumberFormat(i18n.language, { maximumFractionDigits: 2 });
  const valueAt = (row: TrendRow, at: number) => row.points.find((point) => point.at === at)?.value ?? null;
  return (
    <Table
      caption={label}
      spacing="close"
      stickyHead={false}
      rows={times}
      rowKey={(time) => String(time.at)}
      columns={[
        { id: 'time', header: t('trend.time'), cell: (time) => time.label },
        ...rows.map((row) => ({
          id: row.id,
          header: `${row.label} (${row.unit})`,
          align: 'end' as const,
          cell: (time: { at: number; label: string }) => {
            const value = valueAt(row, time.at);
            return value === null ? t('trend.noValue') : format.format(value);
          },
        })),
      ]}
    />
  );
}

export function TrendChart(props: TrendChartProps) {
  const { label, rows, times } = props;
  const { t } = useTranslation('common');
  const { colour, rem } = useTheme();
  const [width, setWidth] = useState(640);
  const [isTableShown, setTableShown] = useState(false);

  if (times.length === 0) return <Text tone="muted">{t('trend.empty')}</Text>;

  const ats = times.map((time) => time.at);
  const span = { from: Math.min(...ats), until: Math.max(...ats) };
  const inset = { start: rem(3.5), end: rem(1.5) };
  const shownTimes = fittingLabels(times, { ...span, left: 0, width: Math.max(rem(6), width - inset.start - inset.end) }, rem(4));

  return (
    <View style={{ gap: space[3] }}>
      {/* Time runs from left to right in every language, as in the record. */}
      <View dir="ltr" role="img" aria-label={label} onLayout={(event: LayoutChangeEvent) => setWidth(event.nativeEvent.layout.width)}>
        <View aria-hidden style={{ gap: space[1] }}>
          {rows.map((row, index) => (
            <View key={row.id}>
              <Text size="small" weight="bold">
                {row.label}{' '}
                <Text size="small" tone="muted">
                  {row.unit}
                </Text>
              </Text>
              <TrendLine
                points={row.points}
                range={row.range}
                span={span}
                times={shownTimes}
                isLast={index === rows.length - 1}
                width={width}
                inset={inset}
                ink={colour[row.tone ?? tones[index % tones.length] ?? 'action']}
              />
            </View>
          ))}
        </View>
      </View>
      <Button
        kind="quiet"
        size="small"
        flush
        label={isTableShown ? t('trend.hideTable') : t('trend.showTable')}
        expanded={isTableShown}
        onPress={() => setTableShown(!isTableShown)}
      />
      {isTableShown ? (
        <TrendTable {...props} />
      ) : (
        <VisuallyHidden block>
          <TrendTable {...props} />
        </VisuallyHidden>
      )}
    </View>
  );
}
