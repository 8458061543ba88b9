/**
 * The screening form: every item yes, no or not known; a yes on a relative item asks a clinician for the reason to go on. The outcome
 * shown while it is filled in is a preview; the server's rule decides.
 */
import { useLocalSearchParams, useRouter } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { RecordShell } from '@/components/features/participant/pictures/RecordShell';
import { Form } from '@/components/forms/Form';
import { useCall, useRead } from '@/components/runtime/api';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Choice } from '@/components/ui/Choice';
import { Notice } from '@/components/ui/Notice';
import { useToast } from '@/components/ui/Toast';
import { space } from '@/components/ui/theme';
import { readParticipant } from '@/shared/contracts/participant';
import { recordScreening } from '@/shared/contracts/readiness';
import { judgeScreening, screeningItems, type ScreeningAnswers } from '@/shared/rules/screening';
import { ScreeningItemCard } from './ScreeningItemCard';

const yesNo = ['no', 'yes'] as const;

export function ScreeningScreen() {
  const { t } = useTranslation('forms');
  const { participantId = '' } = useLocalSearchParams<{ participantId: string }>();
  const router = useRouter();
  const toast = useToast();
  const person = useRead(readParticipant, { params: { participantId } });
  const record = useCall(recordScreening);
  const [key] = useState(() => crypto.randomUUID());
  const [answers, setAnswers] = useState<ScreeningAnswers>({});
  const [seizure, setSeizure] = useState<'yes' | 'no' | null>(null);
  const preview = judgeScreening(answers);
  const left = screeningItems.filter((item) => answers[item.id] === undefined).length + (seizure === null ? 1 : 0);

  const send = () => {
    if (left > 0) return;
    record.mutate(
      { params: { participantId }, body: { answers, seizureHistory: seizure === 'yes' }, key },
      {
        onSuccess: (answer) => {
          toast.show({ text: t(`screening.outcome.${answer.outcome}`), tone: answer.outcome === 'clear' ? 'steady' : 'stop' });
          router.replace({ pathname: '/participants/[participantId]', params: { participantId } });
        },
      },
    );
  };

  return (
    <RecordShell title={t('screening.title')} participantId={participantId} name={person.data?.name ?? ''} lead={t('screening.lead')}>
      <Form onSubmit={send} label={t('screening.title')}>
        {screeningItems.map((item, index) => (
          <ScreeningItemCard
            key={item.id}
            item={item}
            number={index + 1}
            of={screeningItems.length}
            value={answers[item.id] ?? null}
            onChange={(value) => setAnswers((now) => ({ ...now, [item.id]: value }))}
          />
        ))}
        <Card>
          <Choice<'no' | 'yes'> label={t('screening.seizure')} hint={t('screening.seizureHint')} value={seizure} onChange={setSeizure} options={yesNo.map((value) => ({ value, label: t(`screening.answer.${value}`) }))} />
        </Card>
        {left === 0 ? (
          <Notice tone={preview.outcome === 'clear' ? 'steady' : preview.outcome === 'excluded' ? 'stop' : 'caution'} title={t(`screening.outcome.${preview.outcome}`)}>
            {preview.needsReason.length > 0 ? t('screening.needsReason', { count: preview.needsReason.length }) : t('screening.preview')}
          </Notice>
        ) : null}
        {record.error ? (
          <Notice tone="stop" title={record.error.offline ? t('common:notSent') : record.error.problem.detail} announce="assertive">
            {record.error.problem.fields?.map((field) => field.message).join(' ')}
          </Notice>
        ) : null}
        <View style={{ alignItems: 'flex-start', gap: space[2] }}>
          <Button label={t('screening.go')} size="large" disabled={left > 0} {...(left > 0 ? { reason: t('screening.left', { count: left }) } : {})} busy={record.isPending} onPress={send} />
        </View>
      </Form>
    </RecordShell>
  );
}
