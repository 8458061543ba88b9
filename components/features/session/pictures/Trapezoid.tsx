/**
 * One session as a trapezoid: the progress bar of a run (`hero`), a dose to scale beside the one before (`card`), a mark
 * in a line of text (`mark`). It must not compute a dose or a time left, and stands for nothing but a session.
 */
import { View } from 'react-native';
import Svg, { Line, Path, Rect } from 'react-native-svg';
import {
  filledPath,
  outlinePath,
  trapezoidOf,
  type DoseShape,
  type Drawn,
  type Frame,
} from '@/components/features/session/pictures/trapezoid-geometry';
import { Text } from '@/components/ui/Text';
import { space, stroke, useTheme, type Colours } from '@/components/ui/theme';

export type TrapezoidState = 'planned' | 'running' | 'paused' | 'done' | 'stopped';

export interface TrapezoidProps extends DoseShape {
  /** Seconds of the session behind it, pauses not counted. Left out: the whole dose is drawn filled. */
  filledSeconds?: number;
  /** Where it stood still; each is a notch. */
  pauses?: readonly { atSeconds: number; lengthSeconds: number }[];
  /** The dose before an amendment, drawn as a broken outline on the same scale. */
  before?: DoseShape & { intensityMilliamp: number };
  intensityMilliamp: number;
  size: 'hero' | 'card' | 'mark';
  state?: TrapezoidState;
  /** The whole picture in one sentence. */
  label: string;
  /** Words under it: at its start, at its middle, at its end. */
  axis?: { start: string; middle?: string; end: string };
}

/** Paper of each size, in its own units; drawn as wide as there is room. Own choice, after the look of the product. */
const papers = {
  hero: { width: 320, height: 138, leastRampShare: 0.085 },
  card: { width: 460, height: 92, leastRampShare: 0 },
  mark: { width: 32, height: 18, leastRampShare: 0.1875 },
} as const;

function paintOf(state: TrapezoidState, colour: Colours) {
  if (state === 'done') return { fill: colour.steady, edge: colour.steady };
  if (state === 'stopped') return { fill: colour.steady, edge: colour.stop };
  if (state === 'paused') return { fill: colour.actionTint, edge: colour.action };
  return { fill: colour.action, edge: colour.action };
}

export function Trapezoid(props: TrapezoidProps) {
  const { filledSeconds, pauses = [], before, intensityMilliamp, size, state = 'planned', label, axis } = props;
  const { colour } = useTheme();
  const paper = papers[size];
  const line = size === 'mark' ? stroke.hair : stroke.firm;
  // Room for half a line on each side, and above for the line of now.
  const inset = line;
  const longest = Math.max(totalOf(props), before ? totalOf(before) : 0);
  const strongest = Math.max(intensityMilliamp, before?.intensityMilliamp ?? 0);
  const frameOf = (dose: DoseShape): Frame => ({
    width: (paper.width - 2 * inset) * (longest > 0 ? totalOf(dose) / longest : 1),
    height: paper.height,
    leastRampShare: paper.leastRampShare,
  });
  const drawnOf = (dose: DoseShape, milliamp: number): Drawn => ({
    left: inset + (paper.width - 2 * inset - frameOf(dose).width) / 2,
    foot: paper.height - inset,
    rise: (paper.height - 2 * inset) * (strongest > 0 ? milliamp / strongest : 1),
  });

  const frame = frameOf(props);
  const shape = trapezoidOf(props, frame);
  const at = drawnOf(props, intensityMilliamp);
  const now = filledSeconds === undefined ? frame.width : shape.x(filledSeconds);
  const isUnderWay = filledSeconds !== undefined && now > 0 && now < frame.width;
  const paint = paintOf(state, colour);
  const notch = paper.height * 0.1;

  const picture = (
    <Svg
      role="img"
      aria-label={label}
      width={size === 'mark' ? paper.width : '100%'}
      height={size === 'mark' ? paper.height : undefined}
      viewBox={`0 0 ${paper.width} ${paper.height}`}
    >
      {filledSeconds === undefined ? null : (
        <Path
          d={outlinePath(shape, frame, at)}
          fill={colour.sunken}
          stroke={colour.muted}
          strokeWidth={line / 2}
          strokeLinejoin="round"
        />
      )}
      {now > 0 ? <Path d={filledPath(shape, frame, at, now)} fill={paint.fill} /> : null}
      {state === 'paused' ? (
        <Path
          d={filledPath(shape, frame, at, now)}
          fill="none"
          stroke={paint.edge}
          strokeWidth={line}
          strokeLinejoin="round"
        />
      ) : null}
      {pauses.map((pause) => (
        <Rect
          key={pause.atSeconds}
          x={at.left + shape.x(pause.atSeconds) - line}
          y={at.foot - at.rise * shape.level(shape.x(pause.atSeconds)) - 1}
          width={line * 2}
          height={notch + 1}
          fill={colour.surface}
        />
      ))}
      {before ? (
        <Path
          d={outlinePath(
            trapezoidOf(before, frameOf(before)),
            frameOf(before),
            drawnOf(before, before.intensityMilliamp),
          )}
          fill="none"
          stroke={colour.muted}
          strokeWidth={line * 0.75}
          strokeDasharray="5 4"
        />
      ) : null}
      {isUnderWay && size !== 'mark' ? (
        <Line
          x1={at.left + now}
          x2={at.left + now}
          y1={0}
          y2={paper.height}
          stroke={state === 'stopped' ? colour.stop : colour.ink}
          strokeWidth={line * 1.5}
        />
      ) : null}
    </Svg>
  );
  if (size === 'mark') return picture;
  // Time runs from left to right in every language, as on the device and in the record.
  return (
    <View dir="ltr" style={{ gap: space[1] }}>
      {/* A picture as wide as its place: the height follows the paper's shape. */}
      <View style={{ width: '100%', aspectRatio: paper.width / paper.height }}>{picture}</View>
      {axis ? (
        <View style={{ flexDirection: 'row', justifyContent: 'space-between', gap: space[3] }}>
          <Text size="fine" tone="muted" digits>
            {axis.start}
          </Text>
          {axis.middle ? (
            <Text size="fine" tone="muted" digits>
              {axis.middle}
            </Text>
          ) : null}
          <Text size="fine" tone="muted" digits>
            {axis.end}
          </Text>
        </View>
      ) : null}
    </View>
  );
}

function totalOf(dose: DoseShape): number {
  return dose.rampUpSeconds + dose.holdSeconds + dose.rampDownSeconds;
}
