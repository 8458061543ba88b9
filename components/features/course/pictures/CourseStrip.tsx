/**
 * A course as a row of small trapezoids, one a prescribed session, wrapping by week; each with its own text. It must not
 * count, judge or order sessions: it draws what it is given.
 */
import { memo } from 'react';
import { Pressable, View } from 'react-native';
import Svg, { Circle, Path } from 'react-native-svg';
import {
  markParts,
  stripMeasures,
  weeksOf,
  type MarkPart,
  type MarkState,
  type StripMeasure,
  type StripSize,
} from '@/components/features/course/pictures/strip-geometry';
import { radius, space, useTheme, type Colours } from '@/components/ui/theme';

export interface CourseMark {
  number: number;
  state: MarkState;
  /** Delivered share, 0–1; for `partial` and `running`. */
  fraction?: number;
  weekStart?: boolean;
  /** "Session 7, Tuesday 3 March, stopped after 12 of 20 minutes, headache 4 of 10" */
  label: string;
}

export interface CourseStripProps {
  marks: readonly CourseMark[];
  size: StripSize;
  /** The course in one sentence: "7 of 20 sessions behind, 6 delivered as prescribed." */
  label: string;
  onPressMark?(mark: CourseMark): void;
}

function Part({ part, colour }: { part: MarkPart; colour: Colours }) {
  const ink = colour[part.role];
  if (part.kind === 'fill') return <Path d={part.d} fill={ink} />;
  if (part.kind === 'stroke')
    return <Path d={part.d} fill="none" stroke={ink} strokeWidth={part.width} strokeLinejoin="round" />;
  if (part.kind === 'dot') return <Circle cx={part.cx} cy={part.cy} r={part.r} fill={ink} />;
  return <Circle cx={part.cx} cy={part.cy} r={part.r} fill="none" stroke={ink} strokeWidth={part.width} />;
}

const Mark = memo(function Mark({
  mark,
  measure,
  scale,
  colour,
  isNamed,
}: {
  mark: CourseMark;
  measure: StripMeasure;
  scale: number;
  colour: Colours;
  isNamed: boolean;
}) {
  const naming = isNamed ? ({ role: 'img', 'aria-label': mark.label } as const) : ({ 'aria-hidden': true } as const);
  return (
    <Svg
      width={measure.width * scale}
      height={measure.height * scale}
      viewBox={`0 0 ${measure.width} ${measure.height}`}
      {...naming}
    >
      {markParts(mark, measure).map((part, index) => (
        <Part key={index} part={part} colour={colour} />
      ))}
    </Svg>
  );
});

export function CourseStrip({ marks, size, label, onPressMark }: CourseStripProps) {
  const { colour, rem } = useTheme();
  const measure = stripMeasures[size];
  // Grows with the text it stands beside.
  const scale = rem(1) / 16;
  const gap = measure.gap * scale;
  return (
    <View
      role="list"
      aria-label={label}
      style={{
        flexDirection: 'row',
        flexWrap: 'wrap',
        flexShrink: 1,
        maxWidth: '100%',
        columnGap: measure.weekGap * scale,
        rowGap: onPressMark ? space[0] : gap * 2,
      }}
    >
      {weeksOf(marks).map((week) => (
        <View
          key={week[0]?.number}
          role="none"
          style={{ flexDirection: 'row', flexWrap: 'wrap', flexShrink: 1, maxWidth: '100%', gap }}
        >
          {week.map((mark) => (
            <View key={mark.number} role="listitem">
              {onPressMark ? (
                <Pressable
                  role="button"
                  aria-label={mark.label}
                  onPress={() => onPressMark(mark)}
                  style={({ hovered }) => ({
                    // The touch is taller than the mark.
                    paddingVertical: space[3],
                    borderRadius: radius / 2,
                    backgroundColor: hovered ? colour.sunken : 'transparent',
                  })}
                >
                  <Mark mark={mark} measure={measure} scale={scale} colour={colour} isNamed={false} />
                </Pressable>
              ) : (
                <Mark mark={mark} measure={measure} scale={scale} colour={colour} isNamed />
              )}
            </View>
          ))}
        </View>
      ))}
    </View>
  );
}
