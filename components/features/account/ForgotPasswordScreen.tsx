/**
 * Asks for a mail with a link to choose a new password. Says the same whether the address is known or not.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { z } from 'zod';
import { Form } from '@/components/forms/Form';
import { FormTextField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { PublicShell } from '@/components/layout/PublicShell';
import { requestReset } from '@/components/runtime/sign-in';
import { Button } from '@/components/ui/Button';
import { Link } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';
import { Email } from '@/shared/values/primitives';

const ForgotBody = z.strictObject({ email: Email });

export function ForgotPasswordScreen() {
  const { t } = useTranslation('public');
  const form = useContractForm(ForgotBody, { email: '' });
  const [outcome, setOutcome] = useState<'asked' | 'failed' | null>(null);

  const send = form.handleSubmit(async ({ email }) => {
    const answer = await requestReset(email);
    setOutcome(answer.outcome === 'done' ? 'asked' : 'failed');
  });

  return (
    <PublicShell title={t('forgot.title')} lead={t('forgot.lead')}>
      <Form onSubmit={() => void send()}>
        {outcome === 'asked' ? (
          <Notice tone="steady" title={t('forgot.asked')} announce="polite">
            {t('forgot.askedHelp')}
          </Notice>
        ) : null}
        {outcome === 'failed' ? <Notice tone="stop" title={t('forgot.failed')} announce="assertive" /> : null}
        <FormTextField name="email" control={form.control} label={t('signIn.email')} keyboard="email-address" autoComplete="email" />
        <Button label={t('forgot.go')} size="large" grow busy={form.formState.isSubmitting} onPress={() => void send()} />
        <Link href="/sign-in">{t('forgot.back')}</Link>
      </Form>
    </PublicShell>
  );
}
