/**
 * The protocols of own sites: every limit with its ceiling, terms, contacts. An administrator signs a new version.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { StaffShell } from '@/components/layout/StaffShell';
import { usePages } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Definition } from '@/components/ui/Definition';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { listProtocols } from '@/shared/contracts/site';
import type { AnswerOf } from '@/shared/contracts/contract';
import { ProtocolForm } from './ProtocolForm';
import { limitRowsOf, termRowsOf } from './protocol-rows';

export type ProtocolView = AnswerOf<typeof listProtocols>['items'][number];
const wideRem = 60;

export function ProtocolsScreen() {
  const { t } = useTranslation('protocol');
  const me = useMe();
  const list = usePages(listProtocols, { query: {} });
  const protocols = list.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <StaffShell title={t('title')} place="protocols" maxRem={wideRem} subtitle={t('lead')}>
      {list.isPending ? <LoadingState lines={8} /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {list.data && protocols.length === 0 ? <EmptyState title={t('empty')} /> : null}
      {protocols.map((protocol) => (
        <ProtocolCard key={protocol.id} protocol={protocol} mayChange={me?.account.role === 'administrator'} />
      ))}
    </StaffShell>
  );
}

function ProtocolCard({ protocol, mayChange }: { protocol: ProtocolView; mayChange: boolean }) {
  const { t } = useTranslation('protocol');
  const format = useFormat();
  const [editing, setEditing] = useState(false);
  if (editing) return <ProtocolForm protocol={protocol} onDone={() => setEditing(false)} />;
  return (
    <Card
      heading={protocol.siteName}
      note={t('version', { version: protocol.version, name: protocol.signedBy, at: format.dayTime(protocol.signedAt) })}
      {...(mayChange ? { aside: <Button kind="secondary" size="small" label={t('change')} accessibleLabel={t('changeWhich', { site: protocol.siteName })} onPress={() => setEditing(true)} /> } : {})}
    >
      <View style={{ gap: space[6] }}>
        <Text tone="muted">{t('why', { reason: protocol.reason })}</Text>
        <View style={{ gap: space[2] }}>
          <Text heading={3}>{t('limits')}</Text>
          <Definition layout="rows" ruled rows={limitRowsOf(protocol.settings.limits, format, t)} labelRem={20} />
        </View>
        <View style={{ gap: space[2] }}>
          <Text heading={3}>{t('terms')}</Text>
          <Definition layout="rows" ruled rows={termRowsOf(protocol.settings, format, t)} labelRem={20} />
        </View>
        <View style={{ gap: space[2] }}>
          <Text heading={3}>{t('contacts')}</Text>
          <Text tone="muted">{t('contactsHelp')}</Text>
          <View role="list" style={{ gap: space[1] }}>
            {protocol.settings.contacts.map((contact, index) => (
              <Text role="listitem" key={contact.email}>
                {t('contact', { number: index + 1, name: contact.name, email: contact.email, phone: contact.phone })}
              </Text>
            ))}
          </View>
        </View>
      </View>
    </Card>
  );
}
