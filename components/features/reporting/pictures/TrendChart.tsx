/**
 * A few measures as lines over one axis of time, and the same numbers as a table for those who read instead of look. It
 * must not compute a trend or a mean: it draws what was recorded.
 */
import { useState } from 'react';
import { View, type LayoutChangeEvent } from 'react-native';
import Svg, { Circle, G, Line, Path, Text as SvgText } from 'react-native-svg';
import { useTranslation } from 'react-i18next';
import {
  fittingLabels,
  linePath,
  runsOf,
  xOf,
  yOf,
  type RowFrame,
  type TrendPoint,
} from '@/components/features/reporting/pictures/trend-geometry';
import { Button } from '@/components/ui/Button';
import { Table } from '@/components/ui/Table';
import { Text } from '@/components/ui/Text';
import { VisuallyHidden } from '@/components/ui/VisuallyHidden';
import { fontFamily, space, stroke, useTheme, type StateTone } from '@/components/ui/theme';

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
  const { t, i18n } = useTranslation('common');
  const { colour, rem, type } = useTheme();
  const [width, setWidth] = useState(640);
  const [isTableShown, setTableShown] = useState(false);
  const format = new Intl.NumberFormat(i18n.language, { maximumFractionDigits: 2 });

  if (times.length === 0) return <Text tone="muted">{t('trend.empty')}</Text>;

  const small = type('fine');
  const margin = { start: rem(8.5), end: rem(1.5), top: rem(0.75), axis: rem(2) };
  const rowHeight = rem(5);
  const rowGap = rem(1.25);
  const ats = times.map((time) => time.at);
  const shared = {
    left: margin.start,
    width: Math.max(rem(6), width - margin.start - margin.end),
    height: rowHeight,
    from: Math.min(...ats),
    until: Math.max(...ats),
  };
  const frames: RowFrame[] = rows.map((row, index) => ({
    ...shared,
    top: margin.top + index * (rowHeight + rowGap),
    low: row.range[0],
    high: row.range[1],
  }));
  const bottom = margin.top + rows.length * (rowHeight + rowGap) - rowGap;
  const height = bottom + margin.axis;
  const axis: RowFrame = { ...shared, top: margin.top, low: 0, high: 1 };
  const shownTimes = fittingLabels(times, axis, rem(4));
  const words = { fontFamily, fontSize: small.fontSize };

  return (
    <View style={{ gap: space[3] }}>
      {/* Time runs from left to right in every language, as in the record. */}
      <View
        dir="ltr"
        onLayout={(event: LayoutChangeEvent) => setWidth(event.nativeEvent.layout.width)}
        style={{ height }}
      >
        <Svg role="img" aria-label={label} width="100%" height={height} viewBox={`0 0 ${width} ${height}`}>
          {shownTimes.map((time) => (
            <Line
              key={time.at}
              x1={xOf(time.at, axis)}
              x2={xOf(time.at, axis)}
              y1={margin.top}
              y2={bottom}
              stroke={colour.line}
              strokeWidth={stroke.hair}
              strokeDasharray="1 4"
            />
          ))}
          {rows.map((row, index) => {
            const frame = frames[index];
            if (!frame) return null;
            const ink = colour[row.tone ?? tones[index % tones.length] ?? 'action'];
            const foot = frame.top + frame.height;
            return (
              <G key={row.id}>
                <SvgText x={0} y={frame.top + small.fontSize} {...words} fontWeight="700" fill={colour.ink}>
                  {row.label}
                </SvgText>
                <SvgText x={0} y={frame.top + small.fontSize + small.lineHeight} {...words} fill={colour.muted}>
                  {row.unit}
                </SvgText>
                <SvgText
                  x={frame.left - space[2]}
                  y={frame.top + small.fontSize * 0.35}
                  {...words}
                  textAnchor="end"
                  fill={colour.muted}
                >
                  {format.format(frame.high)}
                </SvgText>
                <SvgText
                  x={frame.left - space[2]}
                  y={foot + small.fontSize * 0.35}
                  {...words}
                  textAnchor="end"
                  fill={colour.muted}
                >
                  {format.format(frame.low)}
                </SvgText>
                <Line
                  x1={frame.left}
                  x2={frame.left + frame.width}
                  y1={foot}
                  y2={foot}
                  stroke={colour.muted}
                  strokeWidth={stroke.hair}
                />
                <Line
                  x1={frame.left}
                  x2={frame.left + frame.width}
                  y1={frame.top}
                  y2={frame.top}
                  stroke={colour.line}
                  strokeWidth={stroke.hair}
                />
                {runsOf(row.points, frame).map((run) => (
                  <Path
                    key={run[0]?.x}
                    d={linePath(run)}
                    fill="none"
                    stroke={ink}
                    strokeWidth={stroke.firm}
                    strokeLinejoin="round"
                    strokeLinecap="round"
                  />
                ))}
                {row.points.map((point) =>
                  point.value === null ? null : (
                    <Circle
                      key={point.at}
                      cx={xOf(point.at, frame)}
                      cy={yOf(point.value, frame)}
                      r={3.5}
                      fill={ink}
                      stroke={colour.raised}
                      strokeWidth={stroke.hair}
                    />
                  ),
                )}
              </G>
            );
          })}
          {shownTimes.map((time) => (
            <SvgText
              key={time.at}
              x={xOf(time.at, axis)}
              y={bottom + small.lineHeight}
              {...words}
              textAnchor="middle"
              fill={colour.muted}
            >
              {time.label}
            </SvgText>
          ))}
        </Svg>
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
