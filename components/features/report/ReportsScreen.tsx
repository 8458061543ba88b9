/**
 * Adherence and effects over a site, with the rows behind each number, and the table as a file.
 */
import { useRouter } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { StaffShell } from '@/components/layout/StaffShell';
import { usePages } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Definition } from '@/components/ui/Definition';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Table } from '@/components/ui/Table';
import { Text } from '@/components/ui/Text';
import { space, useTheme } from '@/components/ui/theme';
import { readSiteReport } from '@/shared/contracts/report';
import type { AnswerOf } from '@/shared/contracts/contract';

type Report = AnswerOf<typeof readSiteReport>;
type Row = Report['items'][number];
const half = 24;

export function ReportsScreen() {
  const { t } = useTranslation('report');
  const router = useRouter();
  const format = useFormat();
  const list = usePages(readSiteReport, { query: {} });
  const rows = list.data?.pages.flatMap((page) => page.items) ?? [];
  const totals = list.data?.pages[0]?.totals;
  const interval = (value: Row['interval']) => (value ? t('interval', { low: format.percent(value.low), high: format.percent(value.high) }) : t('none'));
  return (
    <StaffShell
      title={t('title')}
      place="reports"
      subtitle={t('lead')}
      actions={
        <>
          <Button kind="secondary" label={t('print')} onPress={() => window.print()} />
          <Button kind="secondary" label={t('csv')} onPress={() => window.location.assign('/api/reports/sessions.csv')} />
        </>
      }
    >
      {list.isPending ? <LoadingState lines={8} /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {totals ? <Totals totals={totals} /> : null}
      {list.data ? (
        <Table<Row>
          caption={t('caption', { count: rows.length })}
          rows={rows}
          rowKey={(row) => row.participantId}
          onPressRow={(row) => router.push({ pathname: '/participants/[participantId]', params: { participantId: row.participantId } })}
          stickyHead
          empty={<EmptyState title={t('empty')}>{t('emptyHelp')}</EmptyState>}
          columns={[
            { id: 'code', header: t('code'), isRowHeader: true, cell: (row) => row.code },
            { id: 'complete', header: t('complete'), align: 'end', cell: (row) => t('ofPlanned', { complete: row.complete, planned: row.planned }) },
            { id: 'interval', header: t('intervalHead'), align: 'end', cell: (row) => interval(row.interval) },
            { id: 'partial', header: t('partial'), align: 'end', cell: (row) => format.number(row.partial) },
            { id: 'missed', header: t('missed'), align: 'end', cell: (row) => format.number(row.missed) },
            { id: 'worst', header: t('worst'), align: 'end', cell: (row) => (row.worstEffect === null ? t('none') : t('of10', { strength: row.worstEffect })) },
            { id: 'holds', header: t('holds'), align: 'end', cell: (row) => format.number(row.openLockouts) },
          ]}
        />
      ) : null}
      {list.hasNextPage ? <Button kind="secondary" label={t('more')} busy={list.isFetchingNextPage} onPress={() => void list.fetchNextPage()} /> : null}
    </StaffShell>
  );
}

function Totals({ totals }: { totals: Report['totals'] }) {
  const { t } = useTranslation('report');
  const { rem } = useTheme();
  const format = useFormat();
  const cell = { flexGrow: 1, flexShrink: 1, flexBasis: rem(half), minWidth: 0 } as const;
  return (
    <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[6], alignItems: 'stretch' }}>
      <View style={cell}>
        <Card heading={t('adherence')}>
          <Definition
            layout="rows"
            ruled
            rows={[
              { label: t('participants'), value: format.number(totals.participants) },
              {
                label: t('complete'),
                value: t('ofPlanned', { complete: totals.complete, planned: totals.planned }),
                ...(totals.interval ? { hint: t('interval', { low: format.percent(totals.interval.low), high: format.percent(totals.interval.high) }) } : {}),
              },
              { label: t('missed'), value: format.number(totals.missed) },
              { label: t('holds'), value: format.number(totals.openLockouts) },
            ]}
          />
        </Card>
      </View>
      <View style={cell}>
        <Card heading={t('effects')} note={t('effectsNote')}>
          {totals.effects.length === 0 ? <Text tone="muted">{t('noEffects')}</Text> : null}
          <Definition layout="rows" ruled rows={totals.effects.map((effect) => ({ label: t(`diary:effect.${effect.kind}`), value: t('ofSessions', { count: effect.sessions, of: effect.ofSessions }) }))} />
        </Card>
      </View>
    </View>
  );
}
