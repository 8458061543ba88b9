/**
 * A head with the prescribed positions marked, from above (nose up) or from the front as in a mirror; left is where the
 * wearer feels it, in both. It must not be the only place that names a position.
 */
import { View } from 'react-native';
import Svg, { Circle, Ellipse, G, Path, Rect, Text as SvgText } from 'react-native-svg';
import {
  placeFromAbove,
  placeFromFront,
  positionNames,
  type PaperPlace,
} from '@/components/features/session/pictures/positions';
import { Text } from '@/components/ui/Text';
import { fontFamily, space, stroke, useTheme, type Colours } from '@/components/ui/theme';

export interface HeadPlacement {
  /** 10-10 name. */
  position: string;
  polarity: 'anode' | 'cathode';
}

export interface HeadMapProps {
  view?: 'above' | 'front';
  placements: readonly HeadPlacement[];
  /** The whole picture in one sentence: which pad sits where. */
  label: string;
  /** "your left", "your right" */
  leftLabel: string;
  rightLabel: string;
  /** Under the picture: "Seen from above", "As in a mirror". */
  caption?: string;
  /** Widest, in rem; 20 unless given. */
  maxRem?: number;
}

const paper = { width: 260, height: 290 } as const;
/** Centre and half axes of the head from above; heads are longer than wide (own choice of proportion). */
const above = { cx: 130, cy: 154, rx: 104, ry: 120 } as const;
/** The dome of the head from the front: centre of the ears' line, half width, height. */
const front = { cx: 130, cy: 136, rx: 92, ry: 112 } as const;
const pad = { width: 48, height: 36, corner: 7 } as const;

function onPaper(view: 'above' | 'front', name: string): PaperPlace | undefined {
  const place = view === 'above' ? placeFromAbove(name) : placeFromFront(name);
  if (!place) return undefined;
  const frame = view === 'above' ? above : front;
  return { x: frame.cx + place.x * frame.rx, y: frame.cy - place.y * frame.ry };
}

function HeadFromAbove({ colour }: { colour: Colours }) {
  const { cx, cy, rx, ry } = above;
  const line = { fill: colour.raised, stroke: colour.ink, strokeWidth: stroke.firm, strokeLinejoin: 'round' } as const;
  return (
    <G>
      <Path d={`M${cx - 17} ${cy - ry + 4} L${cx} ${cy - ry - 20} L${cx + 17} ${cy - ry + 4}`} {...line} />
      <Path
        d={`M${cx - rx + 2} ${cy - 24} C${cx - rx - 12} ${cy - 20} ${cx - rx - 12} ${cy + 14} ${cx - rx + 2} ${cy + 20}`}
        {...line}
      />
      <Path
        d={`M${cx + rx - 2} ${cy - 24} C${cx + rx + 12} ${cy - 20} ${cx + rx + 12} ${cy + 14} ${cx + rx - 2} ${cy + 20}`}
        {...line}
      />
      <Ellipse cx={cx} cy={cy} rx={rx} ry={ry} {...line} />
    </G>
  );
}

function HeadFromFront({ colour }: { colour: Colours }) {
  const { cx, cy, rx, ry } = front;
  const line = {
    fill: colour.raised,
    stroke: colour.ink,
    strokeWidth: stroke.firm,
    strokeLinejoin: 'round',
    strokeLinecap: 'round',
  } as const;
  const fine = { ...line, fill: 'none', stroke: colour.muted } as const;
  return (
    <G>
      <Path
        d={`M${cx - rx + 1} ${cy - 8} C${cx - rx - 20} ${cy - 16} ${cx - rx - 14} ${cy + 46} ${cx - rx + 5} ${cy + 42}`}
        {...line}
      />
      <Path
        d={`M${cx + rx - 1} ${cy - 8} C${cx + rx + 20} ${cy - 16} ${cx + rx + 14} ${cy + 46} ${cx + rx - 5} ${cy + 42}`}
        {...line}
      />
      <Path
        d={`M${cx - rx} ${cy} A${rx} ${ry} 0 0 1 ${cx + rx} ${cy} C${cx + rx} ${cy + 78} ${cx + 44} ${cy + 136} ${cx} ${cy + 136} C${cx - 44} ${cy + 136} ${cx - rx} ${cy + 78} ${cx - rx} ${cy} Z`}
        {...line}
      />
      <Path d={`M${cx - 54} ${cy + 12} Q${cx - 38} ${cy + 3} ${cx - 22} ${cy + 12}`} {...fine} />
      <Path d={`M${cx + 22} ${cy + 12} Q${cx + 38} ${cy + 3} ${cx + 54} ${cy + 12}`} {...fine} />
      <Circle cx={cx - 38} cy={cy + 26} r={3.5} fill={colour.muted} />
      <Circle cx={cx + 38} cy={cy + 26} r={3.5} fill={colour.muted} />
      <Path d={`M${cx} ${cy + 26} L${cx - 9} ${cy + 64} H${cx + 4}`} {...fine} />
      <Path d={`M${cx - 24} ${cy + 92} Q${cx} ${cy + 102} ${cx + 24} ${cy + 92}`} {...fine} />
    </G>
  );
}

function Pad({ placement, at, colour }: { placement: HeadPlacement; at: PaperPlace; colour: Colours }) {
  const isAnode = placement.polarity === 'anode';
  return (
    <G>
      <Rect
        x={at.x - pad.width / 2}
        y={at.y - pad.height / 2}
        width={pad.width}
        height={pad.height}
        rx={pad.corner}
        fill={isAnode ? colour.action : colour.raised}
        stroke={colour.action}
        strokeWidth={stroke.firm * 1.5}
      />
      <SvgText
        x={at.x}
        y={at.y + 6}
        textAnchor="middle"
        fontFamily={fontFamily}
        fontSize={17}
        fontWeight="700"
        fill={isAnode ? colour.onAction : colour.action}
      >
        {placement.position}
      </SvgText>
    </G>
  );
}

export function HeadMap(props: HeadMapProps) {
  const { view = 'above', placements, label, leftLabel, rightLabel, caption, maxRem = 20 } = props;
  const { colour, rem } = useTheme();
  const marked = placements.map((placement) => placement.position.toLowerCase());
  const dots = positionNames.filter((name) => !marked.includes(name.toLowerCase()));
  return (
    // Left is the wearer's left in every language: the picture does not turn with the text.
    <View dir="ltr" style={{ width: '100%', maxWidth: rem(maxRem), alignSelf: 'center', gap: space[1] }}>
      <View style={{ width: '100%', aspectRatio: paper.width / paper.height }}>
        <Svg role="img" aria-label={label} width="100%" height="100%" viewBox={`0 0 ${paper.width} ${paper.height}`}>
          {view === 'above' ? <HeadFromAbove colour={colour} /> : <HeadFromFront colour={colour} />}
          {dots.map((name) => {
            const at = onPaper(view, name);
            return at ? (
              <Circle
                key={name}
                cx={at.x}
                cy={at.y}
                r={2.2}
                fill={colour.line}
                stroke={colour.muted}
                strokeWidth={0.5}
              />
            ) : null;
          })}
          {placements.map((placement) => {
            const at = onPaper(view, placement.position);
            return at ? <Pad key={placement.position} placement={placement} at={at} colour={colour} /> : null;
          })}
        </Svg>
      </View>
      <View style={{ flexDirection: 'row', justifyContent: 'space-between', gap: space[3] }} aria-hidden>
        <Text size="small" tone="muted">
          {leftLabel}
        </Text>
        {caption ? (
          <Text size="small" tone="muted">
            {caption}
          </Text>
        ) : null}
        <Text size="small" tone="muted">
          {rightLabel}
        </Text>
      </View>
    </View>
  );
}
