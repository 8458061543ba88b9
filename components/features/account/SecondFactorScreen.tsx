/**
 * The six digits after the password. A code kept for emergencies works too.
 */
import { useQueryClient } from '@tanstack/react-query';
import { useLocalSearchParams, useRouter } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { z } from 'zod';
import { Form } from '@/components/forms/Form';
import { FormTextField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { PublicShell } from '@/components/layout/PublicShell';
import { verifyBackupCode, verifyTotp } from '@/components/runtime/sign-in';
import { Button } from '@/components/ui/Button';
import { Link } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';

const CodeBody = z.strictObject({ code: z.string().trim().min(6).max(20) });

export function SecondFactorScreen() {
  const { t } = useTranslation('public');
  const { next } = useLocalSearchParams<{ next?: string }>();
  const router = useRouter();
  const queries = useQueryClient();
  const form = useContractForm(CodeBody, { code: '' });
  const [failed, setFailed] = useState(false);

  const send = form.handleSubmit(async ({ code }) => {
    setFailed(false);
    const outcome = await (/^\d{6}$/.test(code) ? verifyTotp(code) : verifyBackupCode(code));
    if (outcome.outcome !== 'done') return setFailed(true);
    await queries.resetQueries();
    router.replace(next && /^\/[^/\\]/.test(next) ? next : '/');
  });

  return (
    <PublicShell title={t('secondFactor.title')} lead={t('secondFactor.lead')}>
      <Form onSubmit={() => void send()}>
        {failed ? <Notice tone="stop" title={t('secondFactor.wrong')} announce="assertive" /> : null}
        <FormTextField name="code" control={form.control} label={t('secondFactor.code')} autoComplete="one-time-code" keyboard="number-pad" />
        <Button label={t('secondFactor.go')} size="large" grow busy={form.formState.isSubmitting} onPress={() => void send()} />
        <Link href="/sign-in">{t('secondFactor.back')}</Link>
      </Form>
    </PublicShell>
  );
}
