/**
 * The reading column with a place at its bottom that stays in view: what participants, caregivers and visitors see. It
 * must never let its foot cover the content: the foot takes its own room at the end of the page.
 */
import type { ReactNode } from 'react';
import { View } from 'react-native';
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
}

export function Column({ head, children, foot, footOffset = 0, widthRem = readingColumnRem }: ColumnProps) {
  const { colour, rem } = useTheme();
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
          <View style={{ position: 'sticky', bottom: footOffset, backgroundColor: colour.surface, zIndex: 1 }}>
            <View style={{ ...width, gap: space[3], paddingTop: space[3], paddingBottom: space[4] }}>{foot}</View>
          </View>
        ) : null}
      </View>
    </>
  );
}
