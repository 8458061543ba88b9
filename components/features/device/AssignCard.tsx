/**
 * The person's stimulator: which one, or handing one out from the stock.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { useCall, usePages } from '@/components/runtime/api';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { SelectField } from '@/components/ui/Field';
import { Link } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { assignDevice, listDevices } from '@/shared/contracts/device';
import type { ParticipantView } from '@/shared/contracts/participant';

export function AssignCard({ person, writes }: { person: ParticipantView; writes: boolean }) {
  const { t } = useTranslation('equipment');
  const assign = useCall(assignDevice);
  const held = person.readiness.device;
  const stock = usePages(listDevices, { query: { state: 'stock', limit: 100 }, enabled: writes && held === null });
  const devices = (stock.data?.pages.flatMap((page) => page.items) ?? []).filter((device) => device.siteId === person.siteId);
  const [deviceId, setDeviceId] = useState('');
  return (
    <Card heading={t('device.title')}>
      <View style={{ gap: space[4], alignItems: 'flex-start' }}>
        {assign.error ? <Notice tone="stop" title={assign.error.offline ? t('common:notSent') : assign.error.problem.detail} announce="assertive" /> : null}
        {held ? <Text weight="bold">{held.label}</Text> : null}
        {!held && stock.data && devices.length === 0 ? <Text>{t('device.noStock')}</Text> : null}
        {!held && writes && devices.length > 0 ? (
          <>
            <SelectField label={t('device.choose')} value={deviceId} placeholder={t('device.choosePlaceholder')} onChange={setDeviceId} options={devices.map((device) => ({ value: device.id, label: t('device.option', { label: device.label, serial: device.serial }) }))} />
            <Button label={t('device.assign')} disabled={deviceId === ''} busy={assign.isPending} onPress={() => assign.mutate({ params: { deviceId }, body: { participantId: person.id }, key: crypto.randomUUID() })} />
          </>
        ) : null}
        <Link href="/devices">{t('device.register')}</Link>
      </View>
    </Card>
  );
}
