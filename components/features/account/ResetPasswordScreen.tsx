/**
 * Opened from the reset mail: one new password, then to the sign-in page.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { z } from 'zod';
import { Form } from '@/components/forms/Form';
import { FormPasswordField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { PublicShell } from '@/components/layout/PublicShell';
import { useFragment } from '@/components/runtime/fragment';
import { resetPassword } from '@/components/runtime/sign-in';
import { Button } from '@/components/ui/Button';
import { Link } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { NewPassword } from '@/shared/values/primitives';

const ResetBody = z.strictObject({ password: NewPassword });

export function ResetPasswordScreen() {
  const { t } = useTranslation('public');
  const token = useFragment('token');
  const form = useContractForm(ResetBody, { password: '' });
  const [outcome, setOutcome] = useState<'done' | 'refused' | 'offline' | null>(null);

  const send = form.handleSubmit(async ({ password }) => {
    const answer = await resetPassword(token ?? '', password);
    setOutcome(answer.outcome === 'done' ? 'done' : answer.outcome === 'offline' ? 'offline' : 'refused');
  });

  if (token === null || outcome === 'refused') {
    return (
      <PublicShell title={t('reset.overTitle')}>
        <Text>{t('reset.over')}</Text>
        <Link href="/forgot-password">{t('reset.again')}</Link>
      </PublicShell>
    );
  }
  if (outcome === 'done') {
    return (
      <PublicShell title={t('reset.doneTitle')}>
        <Text>{t('reset.done')}</Text>
        <Link href="/sign-in">{t('reset.toSignIn')}</Link>
      </PublicShell>
    );
  }
  return (
    <PublicShell title={t('reset.title')}>
      <Form onSubmit={() => void send()}>
        {outcome === 'offline' ? <Notice tone="stop" title={t('signIn.offline')} announce="assertive" /> : null}
        <FormPasswordField name="password" control={form.control} label={t('reset.password')} hint={t('invitation.passwordHint')} purpose="new-password" />
        <Button label={t('reset.go')} size="large" grow busy={form.formState.isSubmitting} onPress={() => void send()} />
      </Form>
    </PublicShell>
  );
}
