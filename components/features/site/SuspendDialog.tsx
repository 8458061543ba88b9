/**
 * Suspending a member of staff, or letting them back, with the reason.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { useCall } from '@/components/runtime/api';
import { Button } from '@/components/ui/Button';
import { Dialog } from '@/components/ui/Dialog';
import { TextField } from '@/components/ui/Field';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { suspendStaff } from '@/shared/contracts/site';
import type { StaffView } from './SiteScreen';

export function SuspendDialog({ staff, onClose }: { staff: StaffView; onClose(): void }) {
  const { t } = useTranslation('site');
  const suspend = useCall(suspendStaff);
  const [reason, setReason] = useState('');
  const back = staff.state === 'suspended';
  return (
    <Dialog
      open
      title={t(back ? 'letBackTitle' : 'suspendTitle', { name: staff.name })}
      onClose={onClose}
      busy={suspend.isPending}
      actions={
        <>
          <Button kind="secondary" label={t('back')} onPress={onClose} />
          <Button
            kind={back ? 'primary' : 'danger'}
            label={t(back ? 'letBack' : 'suspend')}
            disabled={reason.trim() === ''}
            busy={suspend.isPending}
            onPress={() => suspend.mutate({ params: { accountId: staff.accountId ?? '' }, body: { suspended: !back, reason } }, { onSuccess: onClose })}
          />
        </>
      }
    >
      <View style={{ gap: space[4] }}>
        {suspend.error ? <Notice tone="stop" title={suspend.error.offline ? t('common:notSent') : suspend.error.problem.detail} announce="assertive" /> : null}
        <Text>{t(back ? 'letBackHelp' : 'suspendHelp')}</Text>
        <TextField label={t('reason')} value={reason} onChange={setReason} autoComplete="off" />
      </View>
    </Dialog>
  );
}
