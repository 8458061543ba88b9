/**
 * Who needs somebody, most urgent first: why, since when, whose, the course, and the one next action. Nothing leaves the list here.
 */
import { useLocalSearchParams, useRouter } from 'expo-router';
import { useCallback, useMemo, useRef, useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { StaffShell } from '@/components/layout/StaffShell';
import { useCall, usePages } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { Button } from '@/components/ui/Button';
import { SelectField, TextField, type Focusable } from '@/components/ui/Field';
import { KeyHint } from '@/components/ui/KeyHint';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Table } from '@/components/ui/Table';
import { Text } from '@/components/ui/Text';
import { space, useTheme } from '@/components/ui/theme';
import { claimItem, readWorklist, type WorklistItem } from '@/shared/contracts/worklist';
import { KeysDialog } from './KeysDialog';
import { worklistColumns } from './worklist-columns';
import { useRowKeys } from './use-row-keys';
import { nextOf } from './pictures/why';

const everyMs = 15_000;
const whoseOptions = ['all', 'mine_and_nobodys'] as const;
const searchRem = 16;

export function WorklistScreen() {
  const { t } = useTranslation('worklist');
  const { rem } = useTheme();
  const me = useMe();
  const router = useRouter();
  const format = useFormat();
  const { whose = 'all', search = '' } = useLocalSearchParams<{ whose?: 'all' | 'mine_and_nobodys'; search?: string }>();
  const list = usePages(readWorklist, { query: { whose, ...(search ? { search } : {}) }, everyMs });
  const claim = useCall(claimItem);
  const [helps, setHelps] = useState(false);
  const searchBox = useRef<Focusable | null>(null);
  const keepBox = useCallback((box: Focusable | null) => {
    searchBox.current = box;
  }, []);
  const pages = list.data?.pages;
  const items = useMemo(() => pages?.flatMap((page) => page.items) ?? [], [pages]);
  const first = pages?.[0];
  const writes = me?.account.role === 'clinician' || me?.account.role === 'coordinator';

  const toggle = useCallback(
    (item: WorklistItem | undefined) => {
      if (item && writes) claim.mutate({ params: { itemId: item.id }, body: { claim: !item.owner?.isMe } });
    },
    [claim, writes],
  );
  const open = useCallback(
    (item: WorklistItem | undefined) => {
      if (!item) return;
      router.push(writes ? nextOf(item) : { pathname: '/participants/[participantId]', params: { participantId: item.participantId } });
    },
    [router, writes],
  );
  const active = useRowKeys({
    count: items.length,
    onOpen: (index) => open(items[index]),
    onClaim: (index) => toggle(items[index]),
    onSearch: () => searchBox.current?.focus(),
    onHelp: () => setHelps(true),
  });
  const columns = useMemo(
    () => worklistColumns({ t, format, now: first?.asOf ?? me?.now ?? '', writes, onClaim: toggle, onOpen: open }),
    [t, format, first?.asOf, me?.now, writes, toggle, open],
  );

  return (
    <StaffShell
      title={t('title')}
      place="worklist"
      subtitle={first ? t('subtitle', { needing: t('needing', { count: first.needing }), goingOn: t('goingOn', { count: first.goingOn }) }) : t('common:state.loading')}
      actions={
        <View style={{ flexDirection: 'row', flexWrap: 'wrap', flexShrink: 1, gap: space[3], alignItems: 'flex-end' }}>
          <View style={{ minWidth: rem(searchRem) }}>
            <TextField label={t('find')} value={search} onChange={(text) => router.setParams({ search: text })} trailing={<KeyHint keys="/" />} autoComplete="off" inputRef={keepBox} />
          </View>
          <SelectField
            label={t('whose')}
            value={whose}
            onChange={(value) => router.setParams({ whose: value || 'all' })}
            options={whoseOptions.map((value) => ({ value, label: t(`whoseOption.${value}`) }))}
          />
        </View>
      }
    >
      {list.isPending ? <LoadingState lines={6} /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {list.data ? (
        <Table<WorklistItem>
          caption={t('caption', { count: items.length })}
          columns={columns}
          rows={items}
          rowKey={(item) => item.id}
          onPressRow={open}
          activeKey={items[active]?.id}
          stickyHead
          empty={<EmptyState title={search ? t('emptySearch') : t('empty')}>{search ? '' : t('emptyHelp')}</EmptyState>}
        />
      ) : null}
      {list.hasNextPage ? <Button kind="secondary" label={t('more')} busy={list.isFetchingNextPage} onPress={() => void list.fetchNextPage()} /> : null}
      <View style={{ flexDirection: 'row', flexWrap: 'wrap', justifyContent: 'space-between', gap: space[4] }}>
        <Text size="fine" tone="muted">
          {first ? t('asOf', { time: format.time(first.asOf) }) : ''}
        </Text>
        <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[4] }}>
          <KeyHint keys={['j', 'k']} label={t('keys.move')} />
          <KeyHint keys="Enter" label={t('keys.open')} />
          {writes ? <KeyHint keys="a" label={t('keys.claim')} /> : null}
          <KeyHint keys="?" label={t('keys.all')} />
        </View>
      </View>
      <KeysDialog open={helps} onClose={() => setHelps(false)} />
    </StaffShell>
  );
}
