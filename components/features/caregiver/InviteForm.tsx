/**
 * Inviting a caregiver: name, address, and what they may see. Nothing is shared unless it is switched on.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Form } from '@/components/forms/Form';
import { FormTextField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { ApiProblem, useCall } from '@/components/runtime/api';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Notice } from '@/components/ui/Notice';
import { Switch } from '@/components/ui/Switch';
import { space } from '@/components/ui/theme';
import { inviteCaregiver } from '@/shared/contracts/caregiver';
import { shareNames } from './share-names';

const nothingShared = { adherence: false, diary: false, missedMail: false };

export function InviteForm() {
  const { t } = useTranslation('caregiver');
  const invite = useCall(inviteCaregiver);
  const form = useContractForm(inviteCaregiver.body, { name: '', email: '', shares: { ...nothingShared, missedMail: true } });
  const [said, setSaid] = useState<{ tone: 'steady' | 'stop'; text: string } | null>(null);
  const shares = form.watch('shares');
  const send = form.handleSubmit(async (body) => {
    setSaid(null);
    try {
      await invite.mutateAsync({ body, key: crypto.randomUUID() });
      form.reset();
      setSaid({ tone: 'steady', text: t('invite.sent', { email: body.email }) });
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      const left = form.showServerFields(error.problem.fields);
      if (!error.problem.fields?.length || left.length) setSaid({ tone: 'stop', text: error.offline ? t('offline') : error.problem.detail });
    }
  });
  return (
    <Card heading={t('invite.title')} note={t('invite.note')}>
      <Form onSubmit={() => void send()} label={t('invite.title')}>
        {said ? <Notice tone={said.tone} title={said.text} announce="polite" /> : null}
        <FormTextField name="name" control={form.control} label={t('invite.name')} autoComplete="off" />
        <FormTextField name="email" control={form.control} label={t('invite.email')} keyboard="email-address" autoComplete="off" />
        <View style={{ gap: space[4] }}>
          {shareNames.map((name) => (
            <Switch key={name} label={t(`share.${name}`)} hint={t(`share.${name}Hint`)} value={shares[name]} onChange={(value) => form.setValue('shares', { ...shares, [name]: value })} />
          ))}
        </View>
        <Button label={t('invite.go')} grow busy={form.formState.isSubmitting} onPress={() => void send()} />
      </Form>
    </Card>
  );
}
