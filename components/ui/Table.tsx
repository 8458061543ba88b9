/**
 * Many rows of the same kind: real table roles, a head that stays, rows worked by pointer and keys, and on a phone each
 * row as a small sheet. It must not sort, filter or fetch; it says what was asked for.
 */
import { useId, useState, type KeyboardEvent, type ReactNode } from 'react';
import { Pressable, View, useWindowDimensions, type ViewStyle } from 'react-native';
import { Icon } from '@/components/ui/Icon';
import { Text } from '@/components/ui/Text';
import { VisuallyHidden } from '@/components/ui/VisuallyHidden';
import { useRoving } from '@/components/ui/roving';
import { phoneBelow, radius, space, stroke, useTheme, type Theme } from '@/components/ui/theme';

export interface Column<Row> {
  id: string;
  header: string;
  /** A string is shown as plain text; anything else as it is. */
  cell(row: Row): ReactNode;
  /** Share of the room that is left; 1 unless given. 0 keeps to `minRem`. */
  flex?: number;
  /** Narrowest width, in rem. */
  minRem?: number;
  align?: 'start' | 'end';
  /** Names the row for screen readers; the first column unless another says so. */
  isRowHeader?: boolean;
  sortable?: boolean;
  /** On the phone: no name in front (the strip, the main name). */
  bareOnPhone?: boolean;
  /** Left out on the phone. */
  hideOnPhone?: boolean;
  /** The header is for screen readers only: a column of buttons, of strips. */
  hideHeader?: boolean;
}

export interface Sort {
  columnId: string;
  direction: 'ascending' | 'descending';
}

export interface TableProps<Row> {
  /** What the table holds, for screen readers: "Worklist, 8 rows". */
  caption: string;
  columns: readonly Column<Row>[];
  rows: readonly Row[];
  rowKey(row: Row): string;
  onPressRow?(row: Row): void;
  /** The row that keys `j`/`k` stand on; the screen moves it. */
  activeKey?: string;
  sort?: Sort;
  onSort?(sort: Sort): void;
  spacing?: 'roomy' | 'close';
  /** Shown in place of rows when there are none. */
  empty?: ReactNode;
  /** Keeps the head in view while the page scrolls. */
  stickyHead?: boolean;
  /** What the table stands on, so that a head that stays covers the rows under it. */
  ground?: 'surface' | 'raised';
}

function columnStyle<Row>(column: Column<Row>, theme: Theme): ViewStyle {
  const flex = column.flex ?? 1;
  const least = theme.rem(column.minRem ?? 5);
  return {
    flexGrow: flex,
    flexShrink: flex > 0 ? 1 : 0,
    flexBasis: flex > 0 ? 0 : least,
    minWidth: least,
    alignItems: column.align === 'end' ? 'flex-end' : 'flex-start',
    justifyContent: 'center',
  };
}

function CellContent({ children, align, bold }: { children: ReactNode; align?: 'start' | 'end'; bold?: boolean }) {
  if (typeof children !== 'string' && typeof children !== 'number') return <>{children}</>;
  return (
    <Text digits align={align} weight={bold ? 'bold' : 'regular'}>
      {children}
    </Text>
  );
}

function HeadCell<Row>({ column, sort, onSort }: { column: Column<Row>; sort?: Sort; onSort?(sort: Sort): void }) {
  const theme = useTheme();
  const isSorted = sort?.columnId === column.id;
  const word = (
    <Text size="fine" tone={isSorted ? 'ink' : 'muted'} weight={isSorted ? 'bold' : 'regular'}>
      {column.header}
    </Text>
  );
  return (
    <View
      role="columnheader"
      aria-sort={isSorted ? sort.direction : column.sortable ? 'none' : undefined}
      style={columnStyle(column, theme)}
    >
      {column.hideHeader ? (
        <VisuallyHidden>{column.header}</VisuallyHidden>
      ) : column.sortable && onSort ? (
        <Pressable
          role="button"
          onPress={() =>
            onSort({
              columnId: column.id,
              direction: isSorted && sort.direction === 'ascending' ? 'descending' : 'ascending',
            })
          }
          style={{
            flexDirection: 'row',
            alignItems: 'center',
            gap: space[1],
            minHeight: space[8],
            borderRadius: radius,
          }}
        >
          {word}
          {isSorted ? (
            <Icon name={sort.direction === 'ascending' ? 'sortUp' : 'sortDown'} size={theme.rem(0.75)} />
          ) : null}
        </Pressable>
      ) : (
        word
      )}
    </View>
  );
}

export function Table<Row>(props: TableProps<Row>) {
  const {
    caption,
    columns,
    rows,
    rowKey,
    onPressRow,
    activeKey,
    sort,
    onSort,
    spacing = 'roomy',
    empty,
    stickyHead = true,
    ground = 'surface',
  } = props;
  const theme = useTheme();
  const { colour } = theme;
  const { width } = useWindowDimensions();
  const roving = useRoving();
  const captionId = useId();
  const [focusIndex, setFocusIndex] = useState(0);
  const isPhone = width < phoneBelow;
  const shown = isPhone ? columns.filter((column) => !column.hideOnPhone) : columns;
  const headerId = (columns.find((column) => column.isRowHeader) ?? columns[0])?.id;
  const rowPadding = spacing === 'close' ? space[1] + space.half : space[3];

  const onKey = (event: KeyboardEvent, index: number) => {
    // Keys meant for a button or link inside the row are theirs.
    if (event.target !== event.currentTarget) return;
    if (event.key === 'ArrowLeft' || event.key === 'ArrowRight') return;
    const next = roving.next(event, index, rows.length);
    if (next === null) return;
    event.preventDefault();
    setFocusIndex(next);
    roving.focus(next);
  };

  return (
    <View role="table" aria-labelledby={captionId} aria-rowcount={rows.length + 1} style={{ alignSelf: 'stretch' }}>
      <VisuallyHidden id={captionId}>{caption}</VisuallyHidden>
      {isPhone ? null : (
        <View
          role="rowgroup"
          style={stickyHead ? { position: 'sticky', top: space[0], zIndex: 1, backgroundColor: colour[ground] } : {}}
        >
          <View
            role="row"
            style={{
              flexDirection: 'row',
              columnGap: space[4],
              paddingHorizontal: space[3],
              minHeight: space[10],
              alignItems: 'center',
              borderBottomWidth: stroke.hair,
              borderColor: colour.muted,
            }}
          >
            {shown.map((column) => (
              <HeadCell key={column.id} column={column} sort={sort} onSort={onSort} />
            ))}
          </View>
        </View>
      )}
      <View role="rowgroup" style={isPhone ? { gap: space[3] } : {}}>
        {rows.map((row, index) => {
          const key = rowKey(row);
          const isActive = key === activeKey;
          const cells = shown.map((column) => {
            const isHeader = column.id === headerId;
            const content = (
              <CellContent align={isPhone ? 'start' : column.align} bold={isHeader}>
                {column.cell(row)}
              </CellContent>
            );
            return (
              <View
                key={column.id}
                role={isHeader ? 'rowheader' : 'cell'}
                style={
                  isPhone
                    ? { flexDirection: 'row', flexWrap: 'wrap', alignItems: 'baseline', columnGap: space[3] }
                    : columnStyle(column, theme)
                }
              >
                {isPhone && !isHeader && !column.bareOnPhone && !column.hideHeader ? (
                  <View style={{ width: theme.rem(6), flexShrink: 0 }}>
                    <Text size="fine" tone="muted">
                      {column.header}
                    </Text>
                  </View>
                ) : null}
                {isPhone ? (
                  <View
                    style={{
                      flexGrow: 1,
                      flexShrink: 1,
                      flexBasis: theme.rem(8),
                      minWidth: 0,
                      alignItems: 'flex-start',
                    }}
                  >
                    {content}
                  </View>
                ) : (
                  content
                )}
              </View>
            );
          });
          const style: ViewStyle = isPhone
            ? {
                gap: space[2],
                padding: space[4],
                borderRadius: radius,
                borderWidth: isActive ? stroke.firm : stroke.hair,
                borderColor: isActive ? colour.action : colour.line,
                backgroundColor: colour.raised,
              }
            : {
                flexDirection: 'row',
                alignItems: 'center',
                columnGap: space[4],
                paddingHorizontal: space[3],
                paddingVertical: rowPadding,
                minHeight: spacing === 'close' ? space[10] : space[14],
                borderBottomWidth: stroke.hair,
                borderColor: colour.line,
                ...(isActive ? { backgroundColor: colour.actionTint } : {}),
              };
          if (!onPressRow) {
            return (
              <View key={key} role="row" style={style}>
                {cells}
              </View>
            );
          }
          return (
            <Pressable
              key={key}
              ref={roving.ref(index)}
              role="row"
              aria-selected={activeKey === undefined ? undefined : isActive}
              tabIndex={index === Math.min(focusIndex, rows.length - 1) ? 0 : -1}
              onFocus={() => setFocusIndex(index)}
              onPress={() => onPressRow(row)}
              onKeyDown={(event) => onKey(event, index)}
              style={({ hovered }) => [style, hovered && !isActive ? { backgroundColor: colour.sunken } : null]}
            >
              {cells}
            </Pressable>
          );
        })}
      </View>
      {rows.length === 0 && empty ? <View style={{ paddingVertical: space[4] }}>{empty}</View> : null}
    </View>
  );
}
