/**
 * A sheet of paper on the ground: a heading with something beside it, and what belongs together. It must not be nested
 * in another card; a well (`sunken`) is for that.
 */
import type { ReactNode } from 'react';
import { View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { radius, space, stroke, useTheme, type StateTone } from '@/components/ui/theme';

export interface CardProps {
  children?: ReactNode;
  heading?: string;
  headingLevel?: 2 | 3;
  /** Stands at the end of the heading's line: a tag, a count, a button. */
  aside?: ReactNode;
  /** A second line under the heading. */
  note?: string;
  ground?: 'raised' | 'sunken';
  /** Draws a bar along the start edge in the tone of a state. */
  edge?: StateTone;
  /** `none` for a table that reaches to the sides. */
  padding?: 'regular' | 'close' | 'none';
  /** Takes the room that is left. */
  grow?: boolean;
}

export function Card(props: CardProps) {
  const {
    children,
    heading,
    headingLevel = 2,
    aside,
    note,
    ground = 'raised',
    edge,
    padding = 'regular',
    grow,
  } = props;
  const { colour, density } = useTheme();
  const room = padding === 'none' ? space[0] : padding === 'close' ? space[3] : space[5];
  return (
    <View
      style={{
        flexDirection: 'row',
        backgroundColor: colour[ground],
        borderColor: colour.line,
        borderWidth: stroke.hair,
        borderRadius: radius,
        overflow: 'hidden',
        ...(grow ? { flexGrow: 1, flexShrink: 1, flexBasis: 0 } : {}),
      }}
    >
      {edge ? (
        <View style={{ width: stroke.edge, backgroundColor: edge === 'muted' ? colour.line : colour[edge] }} />
      ) : null}
      <View style={{ flex: 1, minWidth: 0, padding: room, gap: density === 'reading' ? space[4] : space[3] }}>
        {heading ? (
          <View
            style={{ gap: space[1], ...(padding === 'none' ? { padding: space[4], paddingBottom: space[1] } : {}) }}
          >
            <View
              style={{
                flexDirection: 'row',
                flexWrap: 'wrap',
                alignItems: 'baseline',
                columnGap: space[3],
                rowGap: space[1],
              }}
            >
              <View style={{ flexGrow: 1, flexShrink: 1 }}>
                <Text heading={headingLevel} size="lead">
                  {heading}
                </Text>
              </View>
              {typeof aside === 'string' ? (
                <Text size="small" tone="muted" digits>
                  {aside}
                </Text>
              ) : (
                aside
              )}
            </View>
            {note ? (
              <Text size="small" tone="muted">
                {note}
              </Text>
            ) : null}
          </View>
        ) : null}
        {children}
      </View>
    </View>
  );
}
