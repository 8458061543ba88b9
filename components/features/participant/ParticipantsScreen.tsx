/**
 * The participants of own sites as a table: strip, adherence with its interval, last effect, next session, holds. Search, state
 * and order stand in the address, so that a view can be sent to a colleague.
 */
import { useLocalSearchParams, useRouter } from 'expo-router';
import { useMemo } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { StaffShell } from '@/components/layout/StaffShell';
import { usePages } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { Button } from '@/components/ui/Button';
import { SelectField, TextField } from '@/components/ui/Field';
import { ButtonLink } from '@/components/ui/Link';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Table, type Sort } from '@/components/ui/Table';
import { space, useTheme } from '@/components/ui/theme';
import { listParticipants, participantStates, type ParticipantRow } from '@/shared/contracts/participant';
import { participantColumns, sortOf, type SortName } from './participant-columns';

type State = ParticipantRow['state'];
const searchRem = 18;

export function ParticipantsScreen() {
  const { t } = useTranslation('participants');
  const { rem } = useTheme();
  const me = useMe();
  const router = useRouter();
  const format = useFormat();
  const { search = '', state, sort = 'name' } = useLocalSearchParams<{ search?: string; state?: State; sort?: SortName }>();
  const list = usePages(listParticipants, { query: { sort, ...(search ? { search } : {}), ...(state ? { state } : {}) } });
  const pages = list.data?.pages;
  const rows = useMemo(() => pages?.flatMap((page) => page.items) ?? [], [pages]);
  const columns = useMemo(() => participantColumns({ t, format, now: me?.now ?? '' }), [t, format, me?.now]);
  const enrols = me?.account.role === 'clinician' || me?.account.role === 'coordinator';
  const onSort = (next: Sort) => router.setParams({ sort: sortOf(next.columnId) });

  return (
    <StaffShell
      title={t('title')}
      place="participants"
      subtitle={me?.sites.map((site) => site.name).join(', ')}
      actions={enrols ? <ButtonLink href="/participants/new" label={t('enrol')} /> : null}
    >
      <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[4] }}>
        <View style={{ minWidth: rem(searchRem) }}>
          <TextField label={t('find')} value={search} onChange={(text) => router.setParams({ search: text })} autoComplete="off" />
        </View>
        <SelectField
          label={t('stateLabel')}
          value={state ?? 'any'}
          onChange={(value) => router.setParams({ state: value === 'any' || value === '' ? undefined : value })}
          options={(['any', ...participantStates] as const).map((value) => ({ value, label: value === 'any' ? t('anyState') : t(`state.${value}`) }))}
        />
      </View>
      {list.isPending ? <LoadingState lines={8} /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {list.data ? (
        <Table<ParticipantRow>
          caption={t('caption', { count: rows.length })}
          columns={columns}
          rows={rows}
          rowKey={(row) => row.id}
          onPressRow={(row) => router.push({ pathname: '/participants/[participantId]', params: { participantId: row.id } })}
          sort={{ columnId: sort === 'name' ? 'who' : sort, direction: 'ascending' }}
          onSort={onSort}
          stickyHead
          empty={<EmptyState title={search || state ? t('emptySearch') : t('empty')}>{search || state ? '' : t('emptyHelp')}</EmptyState>}
        />
      ) : null}
      {list.hasNextPage ? <Button kind="secondary" label={t('more')} busy={list.isFetchingNextPage} onPress={() => void list.fetchNextPage()} /> : null}
    </StaffShell>
  );
}
