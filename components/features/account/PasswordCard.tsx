/**
 * Changing one's own password, and ending every session of this account.
 */
import { useRouter } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { z } from 'zod';
import { Form } from '@/components/forms/Form';
import { FormPasswordField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { useSignOut } from '@/components/runtime/me';
import { changePassword, signOutEverywhere } from '@/components/runtime/sign-in';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Notice } from '@/components/ui/Notice';
import { NewPassword, PasswordAgain } from '@/shared/values/primitives';

const ChangeBody = z.strictObject({ current: PasswordAgain, next: NewPassword });

export function PasswordCard() {
  const { t } = useTranslation('common');
  const router = useRouter();
  const signOut = useSignOut();
  const form = useContractForm(ChangeBody, { current: '', next: '' });
  const [outcome, setOutcome] = useState<'done' | 'failed' | null>(null);
  const send = form.handleSubmit(async ({ current, next }) => {
    const answer = await changePassword(current, next);
    setOutcome(answer.outcome === 'done' ? 'done' : 'failed');
    if (answer.outcome === 'done') form.reset();
  });
  const everywhere = async () => {
    await signOutEverywhere();
    await signOut();
    router.replace('/sign-in');
  };
  return (
    <Card heading={t('password.title')}>
      <Form onSubmit={() => void send()} label={t('password.title')}>
        {outcome ? <Notice tone={outcome === 'done' ? 'steady' : 'stop'} title={t(`password.${outcome}`)} announce="polite" /> : null}
        <FormPasswordField name="current" control={form.control} label={t('password.current')} />
        <FormPasswordField name="next" control={form.control} label={t('password.next')} hint={t('password.hint')} purpose="new-password" />
        <Button kind="secondary" grow label={t('password.go')} busy={form.formState.isSubmitting} onPress={() => void send()} />
        <Button kind="quiet" label={t('password.everywhere')} onPress={() => void everywhere()} />
      </Form>
    </Card>
  );
}
