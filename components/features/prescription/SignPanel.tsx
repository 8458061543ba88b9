/**
 * A draft, or a version that waits for its second signature: read once more, then signed with the password again.
 */
import { useRouter } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { ApiProblem, useCall } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Definition } from '@/components/ui/Definition';
import { PasswordField } from '@/components/ui/Field';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { useToast } from '@/components/ui/Toast';
import { space } from '@/components/ui/theme';
import { signPrescription, type PrescriptionView } from '@/shared/contracts/prescription';
import { ChangesCard } from './ChangesCard';
import { linesOf } from './differences';

export interface SignPanelProps {
  draft: PrescriptionView;
  before: PrescriptionView | null;
  isClinician: boolean;
  mayEdit: boolean;
  accountName: string;
  onEdit(): void;
}

export function SignPanel({ draft, before, isClinician, mayEdit, accountName, onEdit }: SignPanelProps) {
  const { t } = useTranslation('prescription');
  const format = useFormat();
  const router = useRouter();
  const toast = useToast();
  const sign = useCall(signPrescription);
  const [password, setPassword] = useState('');
  const isSecond = draft.status === 'awaiting_second_signature';
  const ownSignature = draft.signatures.some((signature) => signature.name === accountName);
  const problem = sign.error?.problem;
  const passwordProblem = problem?.fields?.find((field) => field.path.endsWith('password'))?.message;
  // Awaited, not given as a callback: once it is signed the page reads anew and this panel may be gone before a callback is called.
  const go = async () => {
    const body = { contentHash: draft.contentHash, meaning: isSecond ? 'second_signature' : 'prescribed', password } as const;
    try {
      const signed = await sign.mutateAsync({ params: { prescriptionId: draft.id }, body, key: crypto.randomUUID() });
      toast.show({ text: t(signed.status === 'signed' ? 'signed' : 'waits'), tone: 'steady' });
      router.replace({ pathname: '/participants/[participantId]', params: { participantId: draft.participantId } });
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      // The call keeps the problem and it is shown above the password.
      setPassword('');
    }
  };
  return (
    <View style={{ gap: space[5] }}>
      <Notice tone={draft.verdict === 'accept' ? 'info' : 'caution'} title={t(isSecond ? 'waitsTitle' : 'draftTitle')}>
        {t(`verdict.${draft.verdict}`)}
      </Notice>
      <Card heading={t('review')}>
        <Definition layout="rows" ruled rows={linesOf(draft, format, t)} labelRem={18} />
      </Card>
      {before ? <ChangesCard before={before} after={draft} /> : null}
      {draft.reason ? <Text>{t('sessions:quoted', { text: draft.reason })}</Text> : null}
      {draft.signatures.map((signature) => (
        <Text key={signature.meaning} tone="muted">
          {t('signedBy', { name: signature.name, meaning: t(`meanings.${signature.meaning}`), at: format.dayTime(signature.at) })}
        </Text>
      ))}
      {isClinician && !(isSecond && ownSignature) ? (
        <Card>
          <View style={{ gap: space[4], alignItems: 'flex-start' }}>
            {problem && !passwordProblem ? <Notice tone="stop" title={sign.error?.offline ? t('common:notSent') : problem.detail} announce="assertive">{problem.fields?.map((field) => field.message).join(' ')}</Notice> : null}
            <PasswordField label={t('password')} value={password} onChange={setPassword} onSubmit={() => void go()} {...(passwordProblem ? { error: passwordProblem } : {})} />
            <Text size="small" tone="muted">
              {t(isSecond ? 'meaningSecond' : 'meaning')}
            </Text>
            <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[3] }}>
              {mayEdit && !isSecond ? <Button kind="secondary" size="large" label={t('back')} onPress={onEdit} /> : null}
              <Button label={isSecond ? t('signSecond') : t('sign', { version: (before?.version ?? 0) + 1 })} size="large" busy={sign.isPending} disabled={password === ''} onPress={() => void go()} />
            </View>
          </View>
        </Card>
      ) : null}
      {isClinician ? null : <Text tone="muted">{t('asClinician')}</Text>}
    </View>
  );
}
