/**
 * The columns of the worklist. Each cell says one thing; the sentence is the row's.
 */
import type { TFunction } from 'i18next';
import { View } from 'react-native';
import { Strip } from '@/components/features/course/pictures/Strip';
import type { Format } from '@/components/runtime/format';
import { Button } from '@/components/ui/Button';
import type { Column } from '@/components/ui/Table';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import type { WorklistItem } from '@/shared/contracts/worklist';
import { sentenceOf, toneOf } from './pictures/why';

export interface ColumnFacts {
  t: TFunction;
  format: Format;
  now: string;
  writes: boolean;
  onClaim(item: WorklistItem): void;
  onOpen(item: WorklistItem): void;
}

export function worklistColumns({ t, format, now, writes, onClaim, onOpen }: ColumnFacts): Column<WorklistItem>[] {
  return [
    { id: 'why', header: t('column.why'), flex: 0, minRem: 6.5, cell: (item) => <Tag tone={toneOf(item)} label={t(`level.${item.level}`)} /> },
    {
      id: 'who',
      header: t('column.who'),
      flex: 1,
      minRem: 9,
      isRowHeader: true,
      bareOnPhone: true,
      cell: (item) => (
        <View>
          <Text weight="bold">{item.name}</Text>
          {/* A monitor reads by pseudonym: the code stands where the name would. */}
          {item.code === item.name ? null : (
            <Text size="fine" tone="muted" digits>
              {item.code}
            </Text>
          )}
        </View>
      ),
    },
    { id: 'what', header: t('column.what'), flex: 2, minRem: 12, cell: (item) => sentenceOf(item, t) },
    { id: 'since', header: t('column.since'), flex: 0, minRem: 5, cell: (item) => <Text tone="muted">{format.since(item.openedAt, now)}</Text> },
    {
      id: 'owner',
      header: t('column.owner'),
      flex: 0,
      minRem: 7.5,
      cell: (item) => {
        const whose = item.owner ? (item.owner.isMe ? t('you') : item.owner.name) : t('nobody');
        if (!writes || (item.owner && !item.owner.isMe)) return <Text tone="muted">{whose}</Text>;
        return (
          <View style={{ alignItems: 'flex-start' }}>
            <Text tone="muted">{whose}</Text>
            <Button
              kind="quiet"
              size="small"
              flush
              label={item.owner ? t('giveBack') : t('take')}
              accessibleLabel={t(item.owner ? 'giveBackWhom' : 'takeWhom', { name: item.name })}
              onPress={() => onClaim(item)}
            />
          </View>
        );
      },
    },
    { id: 'course', header: t('column.course'), flex: 2, minRem: 14, bareOnPhone: true, cell: (item) => <Strip marks={item.marks} size="row" zone={format.zone} /> },
    {
      id: 'next',
      header: t('column.next'),
      hideHeader: true,
      flex: 0,
      minRem: 10,
      align: 'end',
      bareOnPhone: true,
      cell: (item) =>
        writes ? <Button kind="quiet" size="small" label={t(`next.${item.next}`)} accessibleLabel={t('nextWhom', { action: t(`next.${item.next}`), name: item.name })} onPress={() => onOpen(item)} /> : null,
    },
  ];
}
