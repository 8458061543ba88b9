/**
 * Turning the second factor on: password, then the key for the authenticator app and the emergency codes, then one code.
 */
import { useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { enableSecondFactor, verifyTotp } from '@/components/runtime/sign-in';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { PasswordField, TextField } from '@/components/ui/Field';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';

interface Keys {
  uri: string;
  secret: string;
  backupCodes: readonly string[];
}

export function SecondFactorCard({ enabled, required }: { enabled: boolean; required: boolean }) {
  const { t } = useTranslation('staff');
  const queries = useQueryClient();
  const [password, setPassword] = useState('');
  const [code, setCode] = useState('');
  const [keys, setKeys] = useState<Keys | null>(null);
  const [failed, setFailed] = useState(false);

  const begin = async () => {
    const made = await enableSecondFactor(password);
    setFailed(made === null);
    setKeys(made);
    setPassword('');
  };
  const finish = async () => {
    const outcome = await verifyTotp(code);
    setFailed(outcome.outcome !== 'done');
    if (outcome.outcome === 'done') await queries.invalidateQueries({ queryKey: ['account'] });
  };

  return (
    <Card heading={t('secondFactor.title')} note={required ? t('secondFactor.required') : t('secondFactor.advised')}>
      <View style={{ gap: space[4] }}>
        {failed ? <Notice tone="stop" title={t('secondFactor.failed')} announce="assertive" /> : null}
        {enabled ? <Notice tone="steady" title={t('secondFactor.on')} /> : null}
        {!enabled && !keys ? (
          <>
            <PasswordField label={t('secondFactor.password')} value={password} onChange={setPassword} onSubmit={() => void begin()} />
            <Button kind="secondary" label={t('secondFactor.begin')} onPress={() => void begin()} />
          </>
        ) : null}
        {!enabled && keys ? (
          <>
            <Text>{t('secondFactor.key')}</Text>
            <Text digits weight="bold" selectable>
              {keys.secret}
            </Text>
            <Text>{t('secondFactor.backup')}</Text>
            <Text digits selectable>
              {keys.backupCodes.join('  ')}
            </Text>
            <TextField label={t('secondFactor.code')} value={code} onChange={setCode} autoComplete="one-time-code" keyboard="number-pad" onSubmit={() => void finish()} />
            <Button label={t('secondFactor.finish')} onPress={() => void finish()} />
          </>
        ) : null}
      </View>
    </Card>
  );
}
