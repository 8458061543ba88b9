/**
 * Finding, decision and reason, signed with the password. The server says who may decide what; a refusal is shown as it came.
 */
import { useRouter } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Form } from '@/components/forms/Form';
import { FormChoice, FormPasswordField, FormTextAreaField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { ApiProblem, useCall } from '@/components/runtime/api';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { CheckboxField } from '@/components/ui/Field';
import { Notice } from '@/components/ui/Notice';
import { useToast } from '@/components/ui/Toast';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { recordReview, type WorklistItem } from '@/shared/contracts/worklist';
import { GradingFields } from './GradingFields';

const unsure = { severity: 'moderate', serious: false, causality: 'possible', expected: true } as const;

export function ReviewForm({ item }: { item: WorklistItem }) {
  const { t } = useTranslation('review');
  const router = useRouter();
  const toast = useToast();
  const review = useCall(recordReview);
  const decisions = item.lockoutId ? (['lift', 'keep'] as const) : (['noted', 'done'] as const);
  const form = useContractForm(recordReview.body, { itemId: item.id, finding: '', reason: '', decision: decisions[1], password: '' });
  const [key] = useState(() => crypto.randomUUID());
  const [failed, setFailed] = useState<string | null>(null);
  const grading = form.watch('grading');

  const send = form.handleSubmit(async (body) => {
    setFailed(null);
    try {
      const answer = await review.mutateAsync({ body, key });
      toast.show({ text: answer.lockoutClosed ? t('lifted') : answer.itemClosed ? t('closed') : t('kept'), tone: 'steady' });
      router.replace('/worklist');
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      const left = form.showServerFields(error.problem.fields);
      if (!error.problem.fields?.length || left.length) setFailed(error.offline ? t('offline') : error.problem.detail);
    }
  });

  return (
    <Card heading={t('form.title')} note={item.lockoutId ? t('form.lockout') : t('form.noLockout')}>
      <Form onSubmit={() => void send()} label={t('form.title')}>
        {failed ? <Notice tone="stop" title={failed} announce="assertive" /> : null}
        <FormTextAreaField name="finding" control={form.control} label={t('form.finding')} hint={t('form.findingHint')} rows={3} />
        <FormChoice name="decision" control={form.control} label={t('form.decision')} options={decisions.map((value) => ({ value, label: t(`decision.${value}`), hint: t(`decision.${value}Hint`) }))} />
        <FormTextAreaField name="reason" control={form.control} label={t('form.reason')} rows={2} />
        {item.sessionId ? (
          <View style={{ gap: space[4] }}>
            <CheckboxField label={t('grading.add')} value={grading !== undefined} onChange={(on) => form.setValue('grading', on ? unsure : undefined)} />
            {grading ? <GradingFields value={grading} onChange={(value) => form.setValue('grading', value)} /> : null}
          </View>
        ) : null}
        <FormPasswordField name="password" control={form.control} label={t('form.password')} onSubmit={() => void send()} />
        <Text size="small" tone="muted">
          {t('form.meaning')}
        </Text>
        <Button label={t('form.sign')} size="large" busy={form.formState.isSubmitting} onPress={() => void send()} />
      </Form>
    </Card>
  );
}
