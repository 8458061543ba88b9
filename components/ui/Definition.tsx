/**
 * Names and values in rows: "Strength — 2 mA, for 20 minutes". It must not hold anything that is pressed except a link
 * in a value.
 */
import type { ReactNode } from 'react';
import { View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { space, stroke, useTheme } from '@/components/ui/theme';

export interface DefinitionRow {
  label: string;
  value: ReactNode;
  /** A second, quieter line under the value. */
  hint?: string;
}

export interface DefinitionProps {
  rows: readonly DefinitionRow[];
  /** `rows`: name at the start, value beside it. `stack`: name above value. `columns`: stacks side by side, for heads of pages. */
  layout?: 'rows' | 'stack' | 'columns';
  /** A hairline between rows. */
  ruled?: boolean;
  /** Width of the names, in rem. */
  labelRem?: number;
}

export function Definition({ rows, layout = 'rows', ruled, labelRem }: DefinitionProps) {
  const { colour, rem, density } = useTheme();
  const isRow = layout === 'rows';
  const labelWidth = rem(labelRem ?? (density === 'reading' ? 7 : 9));
  return (
    <View
      style={
        layout === 'columns'
          ? { flexDirection: 'row', flexWrap: 'wrap', columnGap: space[8], rowGap: space[3] }
          : { gap: ruled ? space[0] : isRow ? space[2] : space[4] }
      }
    >
      {rows.map((row, index) => (
        <View
          key={row.label}
          style={{
            flexDirection: isRow ? 'row' : 'column',
            flexWrap: isRow ? 'wrap' : 'nowrap',
            alignItems: isRow ? 'baseline' : 'flex-start',
            columnGap: space[3],
            ...(ruled ? { paddingVertical: space[3] } : {}),
            ...(ruled && index > 0 ? { borderTopWidth: stroke.hair, borderColor: colour.line } : {}),
          }}
        >
          <View role="term" style={isRow ? { width: labelWidth, flexShrink: 0 } : {}}>
            <Text size="small" tone="muted">
              {row.label}
            </Text>
          </View>
          <View
            role="definition"
            style={isRow ? { flexGrow: 1, flexShrink: 1, flexBasis: rem(9), minWidth: 0 } : { alignSelf: 'stretch' }}
          >
            {typeof row.value === 'string' || typeof row.value === 'number' ? (
              <Text size={isRow ? 'small' : 'body'} weight={layout === 'columns' ? 'bold' : 'regular'} digits>
                {row.value}
              </Text>
            ) : (
              row.value
            )}
            {row.hint ? (
              <Text size="fine" tone="muted">
                {row.hint}
              </Text>
            ) : null}
          </View>
        </View>
      ))}
    </View>
  );
}
