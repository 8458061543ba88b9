/**
 * The reading column with a place at its bottom that stays in view: what participants, caregivers and visitors see. It
 * must never let its foot cover the content: the foot takes its own room at the end of the page.
 */
import type { ReactNode } from 'react';
import { View, useWindowDimensions } from 'react-native';
import { mainId } from '@/components/layout/page';
import { readingColumnRem, space, useTheme } from '@/components/ui/theme';

export interface ColumnProps {
  head?: ReactNode;
  children: ReactNode;
  /** Holds the one main button; stays at the bottom of the window. */
  foot?: ReactNode;
  /** Height of what stands below the foot and stays in view too. */
  footOffset?: number;
  widthRem?: number;
  /** Stays in view even where that leaves little room to read: for Stop alone. */
  footAlways?: boolean;
}

/**
 * Lowest window, in rem, in which something may stay in view while the page scrolls under it. In less (a phone on its
 * side, text at 200 %) it would leave too little to read. Own choice.
 */
const roomyRem = 30;

export function useIsRoomy(): boolean {
  const { rem } = useTheme();
  const { height } = useWindowDimensions();
  return height >= rem(roomyRem);
}

export function Column({ head, children, foot, footOffset = 0, widthRem = readingColumnRem, footAlways }: ColumnProps) {
  const { colour, rem } = useTheme();
  const isRoomy = useIsRoomy();
  const width = { width: '100%', maxWidth: rem(widthRem), alignSelf: 'center', paddingHorizontal: space[5] } as const;
  return (
    <>
      {head ? (
        <View role="banner" style={{ ...width, paddingTop: space[5] }}>
          {head}
        </View>
      ) : null}
      <View role="main" id={mainId} style={{ flexGrow: 1, outline: 'none' }}>
        <View style={{ ...width, flexGrow: 1, gap: space[4], paddingTop: space[4], paddingBottom: space[6] }}>
          {children}
        </View>
        {foot ? (
          <View
            style={{
              backgroundColor: colour.surface,
              zIndex: 1,
              ...(isRoomy || footAlways ? { position: 'sticky', bottom: isRoomy ? footOffset : space[0] } : {}),
            }}
          >
            <View style={{ ...width, gap: space[3], paddingTop: space[3], paddingBottom: space[4] }}>{foot}</View>
          </View>
        ) : null}
      </View>
    </>
  );
}
