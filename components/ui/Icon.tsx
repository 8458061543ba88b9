/**
 * The few small shapes that stand beside words: one for each tone, and arrows, ticks and the menu. Hidden from screen
 * readers, for the word beside it says the same. It must never stand alone for a state, and is never the trapezoid.
 */
import { Platform } from 'react-native';
import Svg, { Circle, Path } from 'react-native-svg';
import { useTheme, type Tone } from '@/components/ui/theme';

export type IconName =
  | 'steady'
  | 'caution'
  | 'stop'
  | 'info'
  | 'none'
  | 'back'
  | 'forward'
  | 'down'
  | 'tick'
  | 'close'
  | 'menu'
  | 'external'
  | 'eye'
  | 'eyeClosed'
  | 'sortUp'
  | 'sortDown'
  | 'today'
  | 'diary'
  | 'course'
  | 'help';

export interface IconProps {
  name: IconName;
  tone?: Tone;
  /** Side in px; as high as the text of a panel unless given. */
  size?: number;
}

/** Hidden from assistive technology; the two platforms name that differently. */
const hidden = Platform.OS === 'web' ? { 'aria-hidden': true } : { importantForAccessibility: 'no' as const };

/** Paths on a 16 × 16 field, drawn as lines. */
const lines: Partial<Record<IconName, string>> = {
  back: 'M10 3 L5 8 L10 13',
  forward: 'M6 3 L11 8 L6 13',
  down: 'M3.5 6 L8 10.5 L12.5 6',
  tick: 'M3 8.5 L6.5 12 L13 4.5',
  close: 'M3.5 3.5 L12.5 12.5 M12.5 3.5 L3.5 12.5',
  menu: 'M2 4 H14 M2 8 H14 M2 12 H14',
  external: 'M6 3.5 H3.5 V12.5 H12.5 V10 M9 3 H13 V7 M13 3 L7.5 8.5',
  eye: 'M1.5 8 C4 4 12 4 14.5 8 C12 12 4 12 1.5 8 Z M8 6.2 A1.8 1.8 0 1 1 7.99 6.2',
  eyeClosed: 'M1.5 8 C4 4 12 4 14.5 8 C12 12 4 12 1.5 8 Z M3 13 L13 3',
  sortUp: 'M8 13 V3.5 M4 7 L8 3 L12 7',
  sortDown: 'M8 3 V12.5 M4 9 L8 13 L12 9',
  today: 'M8 1.5 A6.5 6.5 0 1 1 7.99 1.5 M8 4.5 V8 L10.5 9.5',
  diary: 'M3.5 1.5 H12.5 V14.5 H3.5 Z M6 5 H10 M6 8 H10 M6 11 H8.5',
  course: 'M2 3 H14 V14 H2 Z M2 6.5 H14 M5 1.5 V4 M11 1.5 V4',
  help: 'M8 1.5 A6.5 6.5 0 1 1 7.99 1.5 M6 6.3 C6 3.6 10 3.6 10 6.2 C10 7.8 8 7.8 8 9.4 M8 11.4 V11.9',
};

/** Shapes of the tones, filled, told apart by outline alone: round, triangle, octagon, ring. */
const filled: Partial<Record<IconName, string>> = {
  caution: 'M8 1.5 L15.2 14 H0.8 Z',
  stop: 'M5.2 1.2 H10.8 L14.8 5.2 V10.8 L10.8 14.8 H5.2 L1.2 10.8 V5.2 Z',
};

/** What is cut out of a filled shape, drawn as lines in the ground's colour. */
const cuts: Partial<Record<IconName, string>> = {
  steady: 'M4.6 8.2 L7 10.6 L11.4 5.6',
  caution: 'M8 6 V9.6 M8 11.6 V12.1',
  stop: 'M4.8 8 H11.2',
  info: 'M8 7.3 V11.4 M8 4.7 V5.2',
};

export function Icon({ name, tone = 'ink', size }: IconProps) {
  const { colour, rem } = useTheme();
  const side = size ?? rem(1);
  const ink = colour[tone];
  const shape = filled[name];
  const line = lines[name];
  const cut = cuts[name];
  return (
    <Svg width={side} height={side} viewBox="0 0 16 16" {...hidden}>
      {name === 'steady' || name === 'info' ? <Circle cx={8} cy={8} r={7} fill={ink} /> : null}
      {name === 'none' ? <Circle cx={8} cy={8} r={5.5} fill="none" stroke={ink} strokeWidth={2} /> : null}
      {shape ? <Path d={shape} fill={ink} strokeLinejoin="round" /> : null}
      {line ? (
        <Path d={line} fill="none" stroke={ink} strokeWidth={1.8} strokeLinecap="round" strokeLinejoin="round" />
      ) : null}
      {cut ? (
        <Path d={cut} fill="none" stroke={colour.raised} strokeWidth={2} strokeLinecap="round" strokeLinejoin="round" />
      ) : null}
    </Svg>
  );
}
