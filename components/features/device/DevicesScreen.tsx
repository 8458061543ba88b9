/**
 * The register of stimulators: state, who has each, and changing a state.
 */
import { useLocalSearchParams, useRouter } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { StaffShell } from '@/components/layout/StaffShell';
import { usePages } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { Button } from '@/components/ui/Button';
import { SelectField } from '@/components/ui/Field';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Table } from '@/components/ui/Table';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import { useTheme, type StateTone } from '@/components/ui/theme';
import { deviceStates, listDevices, type DeviceView } from '@/shared/contracts/device';
import { AddDeviceForm } from './AddDeviceForm';
import { DeviceStateDialog } from './DeviceStateDialog';

type State = DeviceView['state'];
const tones: Readonly<Record<State, StateTone>> = { stock: 'muted', out: 'steady', quarantined: 'stop', recalled: 'stop', lost: 'caution', retired: 'muted' };

const formRem = 46;

export function DevicesScreen() {
  const { t } = useTranslation('equipment');
  const { rem } = useTheme();
  const router = useRouter();
  const me = useMe();
  const format = useFormat();
  const { state } = useLocalSearchParams<{ state?: State }>();
  const list = usePages(listDevices, { query: state ? { state } : {} });
  const rows = list.data?.pages.flatMap((page) => page.items) ?? [];
  const [changing, setChanging] = useState<DeviceView | null>(null);
  const writes = me !== null && me.account.role !== 'monitor';
  return (
    <StaffShell
      title={t('register.title')}
      place="devices"
      actions={
        <SelectField
          label={t('register.state')}
          value={state ?? 'any'}
          onChange={(value) => router.setParams({ state: value === 'any' || value === '' ? undefined : value })}
          options={(['any', ...deviceStates] as const).map((value) => ({ value, label: value === 'any' ? t('register.anyState') : t(`register.states.${value}`) }))}
        />
      }
    >
      {list.isPending ? <LoadingState lines={6} /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {list.data ? (
        <Table<DeviceView>
          caption={t('register.caption', { count: rows.length })}
          rows={rows}
          rowKey={(row) => row.id}
          stickyHead
          empty={<EmptyState title={t('register.empty')} />}
          columns={[
            { id: 'label', header: t('register.label'), isRowHeader: true, cell: (row) => <Text weight="bold">{row.label}</Text> },
            { id: 'serial', header: t('register.serial'), cell: (row) => row.serial },
            { id: 'model', header: t('register.model'), hideOnPhone: true, flex: 2, cell: (row) => row.model },
            { id: 'firmware', header: t('register.firmware'), hideOnPhone: true, cell: (row) => row.firmware },
            { id: 'calibration', header: t('register.calibration'), cell: (row) => format.date(row.calibrationDueOn) },
            { id: 'state', header: t('register.state'), cell: (row) => <Tag tone={tones[row.state]} label={t(`register.states.${row.state}`)} /> },
            { id: 'with', header: t('register.with'), cell: (row) => row.assignedTo?.name ?? '' },
            { id: 'since', header: t('register.since'), cell: (row) => format.shortDay(row.stateSince) },
            {
              id: 'change',
              header: t('register.change'),
              hideHeader: true,
              align: 'end',
              cell: (row) => (writes && row.state !== 'retired' ? <Button kind="quiet" size="small" label={t('register.change')} accessibleLabel={t('register.changeTitle', { label: row.label })} onPress={() => setChanging(row)} /> : null),
            },
          ]}
        />
      ) : null}
      {list.hasNextPage ? <Button kind="secondary" label={t('register.more')} busy={list.isFetchingNextPage} onPress={() => void list.fetchNextPage()} /> : null}
      {writes && me ? (
        <View style={{ maxWidth: rem(formRem) }}>
          <AddDeviceForm sites={me.sites} />
        </View>
      ) : null}
      {changing ? <DeviceStateDialog device={changing} onClose={() => setChanging(null)} /> : null}
    </StaffShell>
  );
}
