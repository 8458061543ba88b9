/**
 * What one person was given: the stimulator, and supplies by lot with their uses.
 */
import { useLocalSearchParams } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { RecordShell } from '@/components/features/participant/pictures/RecordShell';
import { usePages, useRead } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { Card } from '@/components/ui/Card';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Table } from '@/components/ui/Table';
import { Tag } from '@/components/ui/Tag';
import { space } from '@/components/ui/theme';
import { listSupplies } from '@/shared/contracts/device';
import { readParticipant } from '@/shared/contracts/participant';
import type { AnswerOf } from '@/shared/contracts/contract';
import { AssignCard } from './AssignCard';
import { GiveSupplyForm } from './GiveSupplyForm';

type SupplyRow = AnswerOf<typeof listSupplies>['items'][number];

export function EquipmentScreen() {
  const { t } = useTranslation('equipment');
  const { participantId = '' } = useLocalSearchParams<{ participantId: string }>();
  const me = useMe();
  const format = useFormat();
  const person = useRead(readParticipant, { params: { participantId } });
  const supplies = usePages(listSupplies, { params: { participantId }, query: {} });
  const rows = supplies.data?.pages.flatMap((page) => page.items) ?? [];
  const writes = me?.account.role === 'clinician' || me?.account.role === 'coordinator';
  return (
    <RecordShell title={t('title')} participantId={participantId} name={person.data?.name ?? ''} maxRem={60}>
      <View style={{ gap: space[5] }}>
        {person.data ? <AssignCard person={person.data} writes={writes} /> : <LoadingState />}
        <Card heading={t('supplies.title')} padding="regular">
          {supplies.isPending ? <LoadingState /> : null}
          {supplies.isError ? <FailedState onRetry={() => void supplies.refetch()} /> : null}
          {supplies.data ? (
            <Table<SupplyRow>
              caption={t('supplies.title')}
              rows={rows}
              rowKey={(row) => row.id}
              empty={<EmptyState title={t('supplies.empty')} />}
              columns={[
                { id: 'kind', header: t('supplies.kind'), isRowHeader: true, cell: (row) => t(`supplies.kinds.${row.kind}`) },
                { id: 'lot', header: t('supplies.lot'), cell: (row) => row.lot },
                { id: 'opened', header: t('supplies.openedOn'), cell: (row) => format.date(row.openedOn) },
                { id: 'uses', header: t('supplies.uses'), cell: (row) => (row.maxUses === null ? t('supplies.daysOnly', { count: row.maxDays }) : t('supplies.usesValue', { uses: row.uses, max: row.maxUses, days: row.maxDays })) },
                { id: 'state', header: t('supplies.state'), cell: (row) => <Tag tone={row.endedAt ? 'muted' : 'steady'} label={t(row.endedAt ? 'supplies.ended' : 'supplies.inUse')} /> },
              ]}
            />
          ) : null}
        </Card>
        {writes ? <GiveSupplyForm participantId={participantId} /> : null}
      </View>
    </RecordShell>
  );
}
