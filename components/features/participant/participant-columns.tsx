/**
 * The columns of the participants' table.
 */
import type { TFunction } from 'i18next';
import { View } from 'react-native';
import { Strip } from '@/components/features/course/pictures/Strip';
import type { Format } from '@/components/runtime/format';
import type { Column } from '@/components/ui/Table';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import type { StateTone } from '@/components/ui/theme';
import type { ParticipantRow } from '@/shared/contracts/participant';

export type SortName = 'name' | 'code' | 'since';

/** Column → the contract's name of the order. */
export function sortOf(columnId: string): SortName {
  return columnId === 'since' || columnId === 'code' ? columnId : 'name';
}

export const stateTones: Readonly<Record<ParticipantRow['state'], StateTone>> = {
  invited: 'muted',
  training: 'muted',
  ready: 'steady',
  too_early: 'steady',
  held: 'stop',
  paused: 'caution',
  finished: 'muted',
  withdrawn: 'muted',
};

export function participantColumns({ t, format, now }: { t: TFunction; format: Format; now: string }): Column<ParticipantRow>[] {
  const muted = (text: string) => <Text tone="muted">{text}</Text>;
  return [
    {
      id: 'who',
      header: t('column.who'),
      flex: 1,
      minRem: 8,
      isRowHeader: true,
      sortable: true,
      bareOnPhone: true,
      cell: (row) => (
        <View>
          <Text weight="bold">{row.name}</Text>
          {row.code === row.name ? null : (
            <Text size="fine" tone="muted" digits>
              {row.code}
            </Text>
          )}
        </View>
      ),
    },
    { id: 'state', header: t('column.state'), flex: 0, minRem: 8.75, cell: (row) => <Tag tone={stateTones[row.state]} label={t(`state.${row.state}`)} /> },
    { id: 'course', header: t('column.course'), flex: 2, minRem: 13, bareOnPhone: true, cell: (row) => (row.marks.length > 0 ? <Strip marks={row.marks} size="row" zone={format.zone} /> : muted(t('noCourse'))) },
    {
      id: 'adherence',
      header: t('column.adherence'),
      flex: 0,
      minRem: 7,
      cell: (row) =>
        row.adherence && row.adherence.planned > 0 ? (
          <View>
            <Text digits weight="bold">
              {t('ofPlanned', { complete: row.adherence.complete, planned: row.adherence.planned })}
            </Text>
            {row.adherence.interval ? (
              <Text size="fine" tone="muted" digits>
                {t('interval', { low: format.percent(row.adherence.interval.low), high: format.percent(row.adherence.interval.high) })}
              </Text>
            ) : null}
          </View>
        ) : (
          muted(t('none'))
        ),
    },
    {
      id: 'prescribed',
      header: t('column.prescribed'),
      flex: 0,
      minRem: 7,
      hideOnPhone: true,
      cell: (row) => (row.prescribed ? t('prescribed', { intensity: format.number(row.prescribed.intensityMilliamp), minutes: format.number(row.prescribed.minutes, 0) }) : muted(t('none'))),
    },
    {
      id: 'effect',
      header: t('column.effect'),
      flex: 1,
      minRem: 7,
      cell: (row) => (row.lastEffect ? t('effect', { kind: t(`diary:effect.${row.lastEffect.kind}`), strength: row.lastEffect.strength, since: format.since(row.lastEffect.at, now) }) : muted(t('none'))),
    },
    { id: 'next', header: t('column.next'), flex: 0, minRem: 7, cell: (row) => (row.nextFrom === null || row.state === 'held' || row.state === 'paused' ? muted(t('none')) : row.nextFrom <= now ? t('nextNow') : format.dayTime(row.nextFrom)) },
    { id: 'since', header: t('column.since'), flex: 0, minRem: 4, sortable: true, hideOnPhone: true, cell: (row) => muted(format.shortDay(row.since)) },
  ];
}
