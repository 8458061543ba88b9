/**
 * How things stand together, in steps of the spacing scale: under each other, beside each other, in columns that wrap
 * when they no longer fit. They must not paint anything.
 */
import { Children, type ReactNode } from 'react';
import { View } from 'react-native';
import { space, useTheme } from '@/components/ui/theme';

type Step = keyof typeof space;

export interface StackProps {
  children: ReactNode;
  gap?: Step;
  align?: 'start' | 'stretch' | 'center' | 'end';
}

const flexAlign = {
  start: 'flex-start',
  stretch: 'stretch',
  center: 'center',
  end: 'flex-end',
  baseline: 'baseline',
} as const;
const flexJustify = { start: 'flex-start', between: 'space-between', end: 'flex-end', center: 'center' } as const;

/** Under each other. */
export function Stack({ children, gap = 4, align = 'stretch' }: StackProps) {
  return <View style={{ gap: space[gap], alignItems: flexAlign[align] }}>{children}</View>;
}

export interface RowProps {
  children: ReactNode;
  gap?: Step;
  align?: keyof typeof flexAlign;
  justify?: keyof typeof flexJustify;
  /** Wraps unless told not to. */
  wrap?: boolean;
}

/** Beside each other. */
export function Row({ children, gap = 3, align = 'center', justify = 'start', wrap = true }: RowProps) {
  return (
    <View
      style={{
        flexDirection: 'row',
        flexWrap: wrap ? 'wrap' : 'nowrap',
        alignItems: flexAlign[align],
        justifyContent: flexJustify[justify],
        gap: space[gap],
      }}
    >
      {children}
    </View>
  );
}

export interface ColumnsProps {
  children: ReactNode;
  gap?: Step;
  /** Narrowest column, in rem; below it columns wrap. 10 suits fields, 24 suits cards. */
  minRem?: number;
  /** Shares of the width, one a child; equal unless given. */
  shares?: readonly number[];
  /** `end` sets fields on one line when a label wraps. */
  align?: 'start' | 'stretch' | 'end';
}

/** Columns of equal or given share; each child is one. */
export function Columns({ children, gap = 4, minRem = 10, shares, align = 'start' }: ColumnsProps) {
  const { rem } = useTheme();
  return (
    <View style={{ flexDirection: 'row', flexWrap: 'wrap', alignItems: flexAlign[align], gap: space[gap] }}>
      {Children.toArray(children).map((child, index) => {
        const share = shares?.[index] ?? 1;
        return (
          <View
            key={index}
            style={{ flexGrow: share, flexShrink: 1, flexBasis: rem(minRem) * share, minWidth: 0, maxWidth: '100%' }}
          >
            {child}
          </View>
        );
      })}
    </View>
  );
}
