/**
 * Name and password of somebody new. After it they are signed in and on their first page.
 */
import { useQueryClient } from '@tanstack/react-query';
import { useRouter } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { z } from 'zod';
import { Form } from '@/components/forms/Form';
import { FormPasswordField, FormTextField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { ApiProblem, useCall } from '@/components/runtime/api';
import { signIn } from '@/components/runtime/sign-in';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { acceptInvitation } from '@/shared/contracts/account';
import { NewPassword, PersonName } from '@/shared/values/primitives';

const AcceptBody = z.strictObject({ name: PersonName, password: NewPassword });

export function AcceptForm({ token, email }: { token: string; email: string }) {
  const { t } = useTranslation('public');
  const router = useRouter();
  const queries = useQueryClient();
  const accept = useCall(acceptInvitation);
  const form = useContractForm(AcceptBody, { name: '', password: '' });
  const [failed, setFailed] = useState<string | null>(null);

  const send = form.handleSubmit(async ({ name, password }) => {
    setFailed(null);
    try {
      await accept.mutateAsync({ body: { token, name, password, language: 'en' } });
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      const left = form.showServerFields(error.problem.fields);
      if (!error.problem.fields?.length || left.length) setFailed(error.offline ? t('signIn.offline') : error.problem.detail);
      return;
    }
    await signIn(email, password);
    await queries.resetQueries();
    router.replace('/');
  });

  return (
    <Form onSubmit={() => void send()}>
      {failed ? <Notice tone="stop" title={failed} announce="assertive" /> : null}
      <Text tone="muted">{t('invitation.address', { email })}</Text>
      <FormTextField name="name" control={form.control} label={t('invitation.name')} autoComplete="name" />
      <FormPasswordField name="password" control={form.control} label={t('invitation.password')} hint={t('invitation.passwordHint')} purpose="new-password" />
      <Button label={t('invitation.accept')} size="large" grow busy={form.formState.isSubmitting} onPress={() => void send()} />
    </Form>
  );
}
