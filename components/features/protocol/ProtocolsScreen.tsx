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
import { defaultProtocolSettings } from '@/shared/rules/protocol-defaults';
import type { AnswerOf } from '@/shared/contracts/contract';
import { ProtocolForm } from './ProtocolForm';
import { limitRowsOf, termRowsOf } from './protocol-rows';

type ProtocolView = AnswerOf<typeof listProtocols>['items'][number];
/** What a new version starts from; version 0 = the site has none yet. */
export type ProtocolBase = Pick<ProtocolView, 'siteId' | 'siteName' | 'version' | 'settings'>;
const nobody = { name: '', email: '', phone: '' };
const wideRem = 60;

export function ProtocolsScreen() {
  const { t } = useTranslation('protocol');
  const me = useMe();
  const list = usePages(listProtocols, { query: {} });
  const protocols = list.data?.pages.flatMap((page) => page.items) ?? [];
  const mayChange = me?.account.role === 'administrator';
  const unsigned = list.data && !list.hasNextPage ? (me?.sites ?? []).filter((site) => protocols.every(({ siteId }) => siteId !== site.id)) : [];
  return (
    <StaffShell title={t('title')} place="protocols" maxRem={wideRem} subtitle={t('lead')}>
      {list.isPending ? <LoadingState lines={8} /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {list.data && protocols.length === 0 && unsigned.length === 0 ? <EmptyState title={t('empty')} /> : null}
      {unsigned.map((site) => (
        <UnsignedCard key={site.id} siteId={site.id} siteName={site.name} now={me?.now ?? ''} mayChange={mayChange} />
      ))}
      {protocols.map((protocol) => (
        <ProtocolCard key={protocol.id} protocol={protocol} mayChange={mayChange} />
      ))}
    </StaffShell>
  );
}

/** A site without a protocol: its administrator reads the shipped defaults, changes what the site wants otherwise, and signs. */
function UnsignedCard({ siteId, siteName, now, mayChange }: { siteId: string; siteName: string; now: string; mayChange: boolean }) {
  const { t } = useTranslation('protocol');
  const [editing, setEditing] = useState(false);
  if (editing) {
    const settings = defaultProtocolSettings({ contacts: [nobody], consentRequiredFrom: now });
    return <ProtocolForm protocol={{ siteId, siteName, version: 0, settings }} onDone={() => setEditing(false)} />;
  }
  return (
    <Card
      heading={siteName}
      note={t('unsigned')}
      {...(mayChange ? { aside: <Button size="small" label={t('first')} accessibleLabel={t('firstWhich', { site: siteName })} onPress={() => setEditing(true)} /> } : {})}
    />
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
