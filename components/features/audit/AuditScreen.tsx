/**
 * Who did what, when, before and after, why, newest first; each entry chained to the one before.
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
import { Dialog } from '@/components/ui/Dialog';
import { Definition } from '@/components/ui/Definition';
import { SelectField } from '@/components/ui/Field';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Table } from '@/components/ui/Table';
import { Text } from '@/components/ui/Text';
import { readAudit, type AuditEntry } from '@/shared/contracts/report';

const kinds = ['write', 'read', 'refusal'] as const;
type Kind = (typeof kinds)[number];
const hashShown = 12;

/** "participant.read-timeline" → "participant: read timeline"; the code is the trade's own word, written as one reads. */
function actionOf({ action }: AuditEntry): string {
  return action.replace('.', ': ').replaceAll('-', ' ');
}

export function AuditScreen() {
  const { t } = useTranslation('audit');
  const router = useRouter();
  const me = useMe();
  const format = useFormat();
  const { kind, participantId } = useLocalSearchParams<{ kind?: Kind; participantId?: string }>();
  const list = usePages(readAudit, { query: { ...(kind ? { kind } : {}), ...(participantId ? { participantId } : {}) } });
  const rows = list.data?.pages.flatMap((page) => page.items) ?? [];
  const [open, setOpen] = useState<AuditEntry | null>(null);
  return (
    <StaffShell
      title={t('title')}
      place="audit"
      subtitle={me?.account.role === 'administrator' ? t('leadAdministrator') : t('lead')}
      actions={
        <SelectField
          label={t('kindLabel')}
          value={kind ?? 'any'}
          onChange={(value) => router.setParams({ kind: value === 'any' || value === '' ? undefined : value })}
          options={(['any', ...kinds] as const).map((value) => ({ value, label: value === 'any' ? t('anyKind') : t(`kind.${value}`) }))}
        />
      }
    >
      {list.isPending ? <LoadingState lines={8} /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {list.data ? (
        <Table<AuditEntry>
          caption={t('caption', { count: rows.length })}
          rows={rows}
          rowKey={(row) => row.id}
          onPressRow={setOpen}
          spacing="close"
          stickyHead
          empty={<EmptyState title={t('empty')} />}
          columns={[
            { id: 'at', header: t('at'), minRem: 9, flex: 0, isRowHeader: true, cell: (row) => format.dayTime(row.at) },
            { id: 'who', header: t('who'), cell: (row) => t('actor', { name: row.actor.name, role: t(`role.${row.actor.role}`) }) },
            { id: 'kind', header: t('kindLabel'), flex: 0, minRem: 6, cell: (row) => t(`kind.${row.kind}`) },
            { id: 'action', header: t('action'), cell: (row) => actionOf(row) },
            { id: 'person', header: t('person'), flex: 0, minRem: 7, cell: (row) => row.participantCode ?? t('none') },
            { id: 'why', header: t('why'), cell: (row) => row.why ?? t('none') },
            { id: 'hash', header: t('hash'), flex: 0, minRem: 9, hideOnPhone: true, cell: (row) => <Text size="fine" digits tone="muted">{row.hash.slice(0, hashShown)}</Text> },
          ]}
        />
      ) : null}
      {list.hasNextPage ? <Button kind="secondary" label={t('more')} busy={list.isFetchingNextPage} onPress={() => void list.fetchNextPage()} /> : null}
      {open ? (
        <Dialog open title={t('entry', { sequence: open.sequence })} size="wide" onClose={() => setOpen(null)}>
          <View>
            <Definition
              layout="rows"
              ruled
              rows={[
                { label: t('at'), value: format.dayTime(open.at) },
                { label: t('who'), value: t('actor', { name: open.actor.name, role: t(`role.${open.actor.role}`) }) },
                { label: t('action'), value: actionOf(open) },
                { label: t('subject'), value: open.subject ? `${open.subject.kind} ${open.subject.id}` : t('none') },
                { label: t('before'), value: open.before ? JSON.stringify(open.before) : t('none') },
                { label: t('after'), value: open.after ? JSON.stringify(open.after) : t('none') },
                { label: t('why'), value: open.why ?? t('none') },
                { label: t('chain'), value: open.chain },
                { label: t('hash'), value: open.hash },
                { label: t('previous'), value: open.previousHash },
              ]}
            />
          </View>
        </Dialog>
      ) : null}
    </StaffShell>
  );
}
