/**
 * The delivered current over time, filled, with the plan as a dashed outline. It draws what it is given and adds nothing.
 */
import { useState } from 'react';
import { View, type LayoutChangeEvent } from 'react-native';
import Svg, { Line, Path, Text as SvgText } from 'react-native-svg';
import { fontFamily, stroke, useTheme } from '@/components/ui/theme';

export interface DeliveredCurveProps {
  /** `[seconds, mA]`, in order. */
  curve: readonly (readonly [number, number])[];
  plan: { intensityMilliamp: number; rampUpSeconds: number; holdSeconds: number; rampDownSeconds: number };
  label: string;
  plannedWord: string;
}

const height = 160;
const foot = 20;
const roomAbove = 1.15;
const fontSize = 13;

export function DeliveredCurve({ curve, plan, label, plannedWord }: DeliveredCurveProps) {
  const { colour } = useTheme();
  const [width, setWidth] = useState(0);
  const planned = plan.rampUpSeconds + plan.holdSeconds + plan.rampDownSeconds;
  const lastSeconds = Math.max(planned, curve.at(-1)?.[0] ?? 0, 1);
  const most = Math.max(plan.intensityMilliamp, ...curve.map(([, milliamp]) => milliamp)) * roomAbove;
  const x = (seconds: number) => ((seconds / lastSeconds) * Math.max(0, width - 2) + 1).toFixed(1);
  const y = (milliamp: number) => (height - foot - (milliamp / most) * (height - foot - 1)).toFixed(1);
  const line = (points: readonly (readonly [number, number])[]) => points.map(([seconds, milliamp], index) => `${index === 0 ? 'M' : 'L'}${x(seconds)} ${y(milliamp)}`).join('');
  const planPoints = [
    [0, 0],
    [plan.rampUpSeconds, plan.intensityMilliamp],
    [plan.rampUpSeconds + plan.holdSeconds, plan.intensityMilliamp],
    [planned, 0],
  ] as const;
  const first = curve[0];
  const last = curve.at(-1);
  return (
    <View onLayout={(event: LayoutChangeEvent) => setWidth(event.nativeEvent.layout.width)} style={{ height }}>
      {width > 0 ? (
        <Svg width={width} height={height} role="img" aria-label={label}>
          {first && last ? <Path d={`${line([[first[0], 0], ...curve, [last[0], 0]])}Z`} fill={colour.steady} /> : null}
          <Path d={line(planPoints)} fill="none" stroke={colour.muted} strokeWidth={stroke.hair} strokeDasharray="4 3" />
          <Line x1={1} x2={width - 1} y1={height - foot} y2={height - foot} stroke={colour.line} strokeWidth={stroke.hair} />
          <SvgText x={width - 2} y={height - 4} textAnchor="end" fill={colour.muted} fontFamily={fontFamily} fontSize={fontSize}>
            {plannedWord}
          </SvgText>
        </Svg>
      ) : null}
    </View>
  );
}
