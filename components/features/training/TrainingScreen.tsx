/**
 * Signing off training skill by skill, capability of person and home, and recording watched sessions.
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
import { CheckboxField, TextAreaField, TextField } from '@/components/ui/Field';
import { Notice } from '@/components/ui/Notice';
import { useToast } from '@/components/ui/Toast';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { readParticipant } from '@/shared/contracts/participant';
import { recordTraining } from '@/shared/contracts/readiness';
import { capabilityItems, trainingSkills } from '@/shared/rules/screening';
import { WatchedCard } from './WatchedCard';

type Ticks = Readonly<Record<string, boolean>>;

function noneOf(ids: readonly string[]): Ticks {
  return Object.fromEntries(ids.map((id) => [id, false]));
}

export function TrainingScreen() {
  const { t } = useTranslation('forms');
  const { participantId = '' } = useLocalSearchParams<{ participantId: string }>();
  const router = useRouter();
  const toast = useToast();
  const person = useRead(readParticipant, { params: { participantId } });
  const record = useCall(recordTraining);
  const [key] = useState(() => crypto.randomUUID());
  const [skills, setSkills] = useState<Ticks>(() => noneOf(trainingSkills));
  const [capability, setCapability] = useState<Ticks>(() => noneOf(capabilityItems));
  const [helperName, setHelperName] = useState('');
  const [remark, setRemark] = useState('');
  const open = [...Object.values(skills), ...Object.values(capability)].filter((done) => !done).length;

  const send = () =>
    record.mutate(
      { params: { participantId }, body: { skills, capability, ...(helperName ? { helperName } : {}), ...(remark ? { remark } : {}) }, key },
      {
        onSuccess: (answer) => {
          toast.show({ text: t(answer.signedOff ? 'training.signedOff' : 'training.kept', { count: answer.open.length }), tone: answer.signedOff ? 'steady' : 'caution' });
          router.replace({ pathname: '/participants/[participantId]', params: { participantId } });
        },
      },
    );

  return (
    <RecordShell title={t('training.title')} participantId={participantId} name={person.data?.name ?? ''} lead={t('training.lead')}>
      <Form onSubmit={send} label={t('training.title')}>
        <Card heading={t('training.skills')} note={t('training.skillsNote')}>
          <View style={{ gap: space[3] }}>
            {trainingSkills.map((id) => (
              <CheckboxField key={id} label={t(`training.skill.${id}`)} value={skills[id] ?? false} onChange={(done) => setSkills((now) => ({ ...now, [id]: done }))} />
            ))}
          </View>
        </Card>
        <Card heading={t('training.capability')} note={t('training.capabilityNote')}>
          <View style={{ gap: space[3] }}>
            {capabilityItems.map((id) => (
              <CheckboxField key={id} label={t(`training.capable.${id}`)} value={capability[id] ?? false} onChange={(done) => setCapability((now) => ({ ...now, [id]: done }))} />
            ))}
            <TextField label={t('training.helper')} hint={t('training.helperHint')} value={helperName} onChange={setHelperName} autoComplete="off" />
            <TextAreaField label={t('remark')} value={remark} onChange={setRemark} rows={2} />
          </View>
        </Card>
        {record.error ? <Notice tone="stop" title={record.error.offline ? t('common:notSent') : record.error.problem.detail} announce="assertive" /> : null}
        {open > 0 ? <Text tone="muted">{t('training.open', { count: open })}</Text> : null}
        <View style={{ alignItems: 'flex-start' }}>
          <Button label={t(open === 0 ? 'training.go' : 'training.keep')} size="large" busy={record.isPending} onPress={send} />
        </View>
      </Form>
      {person.data ? <WatchedCard participantId={participantId} done={person.data.readiness.watched.done} required={person.data.readiness.watched.required} /> : null}
    </RecordShell>
  );
}
