/**
 * Own sites and their staff. An administrator adds sites, invites, suspends and lets back.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { StaffShell } from '@/components/layout/StaffShell';
import { usePages } from '@/components/runtime/api';
import { useMe } from '@/components/runtime/me';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Definition } from '@/components/ui/Definition';
import { ButtonLink } from '@/components/ui/Link';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Table } from '@/components/ui/Table';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import { space, useTheme } from '@/components/ui/theme';
import { listSites, listStaff } from '@/shared/contracts/site';
import type { AnswerOf } from '@/shared/contracts/contract';
import { AddSiteForm } from './AddSiteForm';
import { InviteStaffForm } from './InviteStaffForm';
import { SuspendDialog } from './SuspendDialog';

export type StaffView = AnswerOf<typeof listStaff>['items'][number];
const tones = { invited: 'muted', active: 'steady', suspended: 'stop' } as const;

const formRem = 46;

export function SiteScreen() {
  const { t } = useTranslation('site');
  const { rem } = useTheme();
  const me = useMe();
  const sites = usePages(listSites, { query: {} });
  const all = sites.data?.pages.flatMap((page) => page.items) ?? [];
  const isAdministrator = me?.account.role === 'administrator';
  return (
    <StaffShell title={t('title')} place="site" actions={<ButtonLink href="/site/qualification" label={t('qualification')} kind="secondary" />}>
      {sites.isPending ? <LoadingState lines={5} /> : null}
      {sites.isError ? <FailedState onRetry={() => void sites.refetch()} /> : null}
      {all.map((site) => (
        <Card key={site.id} heading={site.name} note={t(`kind.${site.kind}`)}>
          <Definition
            layout="columns"
            rows={[
              { label: t('code'), value: site.code },
              { label: t('phone'), value: site.phone },
              { label: t('emergency'), value: site.emergencyNumber },
              { label: t('zone'), value: site.zone },
            ]}
          />
        </Card>
      ))}
      {sites.data && all.length === 0 ? <EmptyState title={t('empty')}>{t('emptyHelp')}</EmptyState> : null}
      {all.length > 0 ? <StaffTable names={new Map(all.map((site) => [site.id, site.name]))} mayChange={isAdministrator} myId={me?.account.id ?? ''} /> : null}
      {isAdministrator && sites.data ? (
        <View style={{ gap: space[5], maxWidth: rem(formRem) }}>
          {all.length > 0 ? <InviteStaffForm sites={all.map(({ id, name }) => ({ value: id, label: name }))} /> : null}
          <AddSiteForm />
        </View>
      ) : null}
    </StaffShell>
  );
}

function StaffTable({ names, mayChange, myId }: { names: ReadonlyMap<string, string>; mayChange: boolean; myId: string }) {
  const { t } = useTranslation('site');
  const list = usePages(listStaff, { query: {} });
  const rows = list.data?.pages.flatMap((page) => page.items) ?? [];
  const [changing, setChanging] = useState<StaffView | null>(null);
  return (
    <Card heading={t('staff')}>
      {list.isPending ? <LoadingState lines={5} /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {list.data ? (
        <Table<StaffView>
          caption={t('staffCaption', { count: rows.length })}
          rows={rows}
          rowKey={(row) => row.accountId ?? row.invitationId ?? row.email}
          columns={[
            {
              id: 'name',
              header: t('name'),
              isRowHeader: true,
              bareOnPhone: true,
              cell: (row) => (
                <View>
                  <Text weight="bold">{row.name}</Text>
                  <Text size="fine" tone="muted">
                    {row.email}
                  </Text>
                </View>
              ),
            },
            { id: 'role', header: t('role'), cell: (row) => t(`public:role.${row.role}`) },
            { id: 'sites', header: t('sites'), cell: (row) => row.siteIds.map((id) => names.get(id)).filter(Boolean).join(', ') },
            { id: 'state', header: t('state'), cell: (row) => <Tag tone={tones[row.state]} label={t(`states.${row.state}`)} /> },
            { id: 'factor', header: t('factor'), hideOnPhone: true, cell: (row) => t(row.secondFactor ? 'on' : 'off') },
            {
              id: 'change',
              header: t('change'),
              hideHeader: true,
              align: 'end',
              cell: (row) =>
                mayChange && row.accountId && row.accountId !== myId ? (
                  <Button
                    kind="quiet"
                    size="small"
                    label={t(row.state === 'suspended' ? 'letBack' : 'suspend')}
                    accessibleLabel={t(row.state === 'suspended' ? 'letBackWhom' : 'suspendWhom', { name: row.name })}
                    onPress={() => setChanging(row)}
                  />
                ) : null,
            },
          ]}
        />
      ) : null}
      {list.hasNextPage ? <Button kind="quiet" label={t('more')} onPress={() => void list.fetchNextPage()} /> : null}
      {changing ? <SuspendDialog staff={changing} onClose={() => setChanging(null)} /> : null}
    </Card>
  );
}
