/**
 * Signing in. In the demo it also offers the demo's accounts. It says the same for a wrong address and a wrong password. Mails lead
 * here: who is signed in already goes straight on.
 */
import { useQueryClient } from '@tanstack/react-query';
import { Redirect, useLocalSearchParams, useRouter, type Href } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { z } from 'zod';
import { Form } from '@/components/forms/Form';
import { FormPasswordField, FormTextField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { PublicShell } from '@/components/layout/PublicShell';
import { useMe } from '@/components/runtime/me';
import { signIn, type AuthOutcome } from '@/components/runtime/sign-in';
import { Button } from '@/components/ui/Button';
import { Link } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';
import { space } from '@/components/ui/theme';
import { Email, PasswordAgain } from '@/shared/values/primitives';
import { DemoAccounts } from './DemoAccounts';

const SignInBody = z.strictObject({ email: Email, password: PasswordAgain });

/** Only addresses of our own: `//elsewhere` and `https:` are not followed. */
function safeNext(next: string | string[] | undefined): Href {
  return (typeof next === 'string' && /^\/[^/\\]/.test(next) ? next : '/');
}

export function SignInScreen() {
  const { t } = useTranslation('public');
  const { next } = useLocalSearchParams<{ next?: string }>();
  const router = useRouter();
  const queries = useQueryClient();
  const me = useMe();
  const form = useContractForm(SignInBody, { email: '', password: '' });
  const [failed, setFailed] = useState<AuthOutcome | null>(null);

  const send = form.handleSubmit(async ({ email, password }) => {
    setFailed(null);
    const outcome = await signIn(email, password);
    if (outcome.outcome === 'second_factor') return router.push(`/second-factor?next=${encodeURIComponent(String(safeNext(next)))}`);
    if (outcome.outcome !== 'done') return setFailed(outcome);
    // What was read is read again, as who has come; the page then goes on by itself.
    await queries.resetQueries();
  });

  if (me) return <Redirect href={safeNext(next)} />;
  return (
    <PublicShell title={t('signIn.title')} lead={t('signIn.lead')}>
      <Form onSubmit={() => void send()} label={t('signIn.title')}>
        {failed ? <Notice tone="stop" title={failureOf(failed, t)} announce="assertive" /> : null}
        <FormTextField name="email" control={form.control} label={t('signIn.email')} keyboard="email-address" autoComplete="email" />
        <FormPasswordField name="password" control={form.control} label={t('signIn.password')} onSubmit={() => void send()} />
        <Button label={t('signIn.go')} size="large" grow busy={form.formState.isSubmitting} onPress={() => void send()} />
        <View style={{ paddingTop: space[2] }}>
          <Link href="/forgot-password">{t('signIn.forgot')}</Link>
        </View>
      </Form>
      <DemoAccounts
        onChoose={(email, password) => {
          form.setValue('email', email, { shouldValidate: true });
          form.setValue('password', password, { shouldValidate: true });
          void send();
        }}
      />
    </PublicShell>
  );
}

function failureOf(outcome: AuthOutcome, t: (key: string) => string): string {
  if (outcome.outcome === 'offline') return t('signIn.offline');
  return outcome.outcome === 'refused' && outcome.code === 'too_many' ? t('signIn.tooMany') : t('signIn.wrong');
}
