/**
 * One measure over time: axis, line and dots by the charts library, in the theme's ink. It must not be read aloud: the chart
 * round it has one name and a table with the same numbers.
 */
import type { ReactNode } from 'react';
import Svg from 'react-native-svg';
import { useTranslation } from 'react-i18next';
import { VictoryAxis, VictoryChart, VictoryLine, VictoryScatter } from 'victory-native';
import type { TrendPoint } from '@/components/features/reporting/pictures/trend-geometry';
import { fontFamily, stroke, useTheme } from '@/components/ui/theme';

export interface TrendLineProps {
  /** In the order of time; a null value leaves a gap in the line. */
  points: readonly TrendPoint[];
  range: readonly [number, number];
  /** Milliseconds at both ends of the axis. */
  span: { from: number; until: number };
  times: readonly { at: number; label: string }[];
  /** The lowest of several: it carries the labels of time. */
  isLast: boolean;
  width: number;
  /** Room for the labels of the value axis, and for half a label of time. */
  inset: { start: number; end: number };
  ink: string;
}

interface FrameProps {
  width?: number;
  height?: number;
  children?: ReactNode;
}

/** The library's own frame gives every drawing the same id for its title, which would be read wrongly; this one has no title. */
function Frame({ width = 0, height = 0, children }: FrameProps) {
  return (
    <Svg width={width} height={height} viewBox={`0 0 ${width} ${height}`}>
      {children}
    </Svg>
  );
}

const dotRadius = 3.5;
const rowRem = 5;
const axisRem = 2;
const topRem = 0.75;

export function TrendLine({ points, range, span, times, isLast, width, inset, ink }: TrendLineProps) {
  const { i18n } = useTranslation();
  const { colour, rem, type } = useTheme();
  const format = new Intl.NumberFormat(i18n.language, { maximumFractionDigits: 2 });
  const words = { fontFamily, fontSize: type('fine').fontSize, fill: colour.muted };
  const bottom = isLast ? rem(axisRem) : rem(topRem);
  const data = points.map(({ at, value }) => ({ x: at, y: value }));
  const recorded = data.filter(({ y }) => y !== null);
  // One instant has no length: half a day to each side puts its dot in the middle.
  const halfDay = 43_200_000;
  const domain: [number, number] = span.until > span.from ? [span.from, span.until] : [span.from - halfDay, span.from + halfDay];
  return (
    <VictoryChart
      width={width}
      height={rem(topRem) + rem(rowRem) + bottom}
      padding={{ top: rem(topRem), bottom, left: inset.start, right: inset.end }}
      domain={{ x: domain, y: [range[0], range[1]] }}
      containerComponent={<Frame />}
    >
      <VictoryAxis
        tickValues={times.map(({ at }) => at)}
        tickFormat={(at: number) => (isLast ? (times.find((time) => time.at === at)?.label ?? '') : '')}
        style={{
          axis: { stroke: colour.muted, strokeWidth: stroke.hair },
          grid: { stroke: colour.line, strokeWidth: stroke.hair, strokeDasharray: '1 4' },
          ticks: { stroke: 'none' },
          tickLabels: words,
        }}
      />
      <VictoryAxis
        dependentAxis
        tickValues={[range[0], range[1]]}
        tickFormat={(value: number) => format.format(value)}
        style={{
          axis: { stroke: 'none' },
          grid: { stroke: colour.line, strokeWidth: stroke.hair },
          ticks: { stroke: 'none' },
          tickLabels: words,
        }}
      />
      <VictoryLine data={data} style={{ data: { stroke: ink, strokeWidth: stroke.firm, strokeLinejoin: 'round', strokeLinecap: 'round' } }} />
      <VictoryScatter data={recorded} size={dotRadius} style={{ data: { fill: ink, stroke: colour.raised, strokeWidth: stroke.hair } }} />
    </VictoryChart>
  );
}
