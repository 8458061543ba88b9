/**
 * Changing a stimulator's state, with the reason. Which state may follow which is the server's rule; its refusal is shown.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { useCall } from '@/components/runtime/api';
import { Button } from '@/components/ui/Button';
import { Dialog } from '@/components/ui/Dialog';
import { SelectField, TextField } from '@/components/ui/Field';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { changeDeviceState, type DeviceView } from '@/shared/contracts/device';

const states = changeDeviceState.body.shape.state.options;

export function DeviceStateDialog({ device, onClose }: { device: DeviceView; onClose(): void }) {
  const { t } = useTranslation('equipment');
  const change = useCall(changeDeviceState);
  const [state, setState] = useState<(typeof states)[number] | ''>('');
  const [reason, setReason] = useState('');
  const go = () => state && change.mutate({ params: { deviceId: device.id }, body: { state, reason } }, { onSuccess: onClose });
  return (
    <Dialog
      open
      title={t('register.changeTitle', { label: device.label })}
      onClose={onClose}
      busy={change.isPending}
      actions={
        <>
          <Button kind="secondary" label={t('register.back')} onPress={onClose} />
          <Button label={t('register.changeGo')} busy={change.isPending} disabled={state === '' || reason.trim() === ''} onPress={go} />
        </>
      }
    >
      <View style={{ gap: space[4] }}>
        {change.error ? <Notice tone="stop" title={change.error.offline ? t('common:notSent') : change.error.problem.detail} announce="assertive" /> : null}
        <Text>{t('register.changeHelp')}</Text>
        <SelectField<(typeof states)[number]> label={t('register.to')} value={state} placeholder={t('register.state')} onChange={setState} options={states.filter((value) => value !== device.state).map((value) => ({ value, label: t(`register.states.${value}`) }))} />
        <TextField label={t('register.reason')} value={reason} onChange={setReason} autoComplete="off" />
      </View>
    </Dialog>
  );
}
