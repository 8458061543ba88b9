/**
 * The caregiver's own six digits, which they type on the participant's phone to say that they are there.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { useCall } from '@/components/runtime/api';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { TextField } from '@/components/ui/Field';
import { Notice } from '@/components/ui/Notice';
import { space } from '@/components/ui/theme';
import { setCaregiverCode } from '@/shared/contracts/caregiver';

const codeLength = 6;

export function CodeCard() {
  const { t } = useTranslation('caregiver');
  const set = useCall(setCaregiverCode);
  const [code, setCode] = useState('');
  return (
    <Card heading={t('code.title')} note={t('code.note')}>
      <View style={{ gap: space[4] }}>
        {set.data ? <Notice tone="steady" title={t('code.kept')} announce="polite" /> : null}
        {set.error ? <Notice tone="stop" title={set.error.offline ? t('offline') : set.error.problem.detail} announce="assertive" /> : null}
        <TextField label={t('code.label')} value={code} onChange={(text) => setCode(text.replace(/\D/g, ''))} maxLength={codeLength} keyboard="number-pad" autoComplete="off" />
        <Button kind="secondary" grow label={t('code.go')} disabled={code.length !== codeLength} busy={set.isPending} onPress={() => set.mutate({ body: { code } }, { onSuccess: () => setCode('') })} />
      </View>
    </Card>
  );
}
