/**
 * What must stand before a first session, step by step, each with its state and the way to do it.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import type { Href } from 'expo-router';
import { useCall } from '@/components/runtime/api';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { ButtonLink } from '@/components/ui/Link';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import { useToast } from '@/components/ui/Toast';
import { space, stroke, useTheme, type StateTone } from '@/components/ui/theme';
import { inviteAgain, type ParticipantView } from '@/shared/contracts/participant';

interface Step {
  id: string;
  word: string;
  done: boolean;
  href: Href | null;
  facts?: Record<string, string | number>;
}

function stepsOf({ id, readiness, state }: ParticipantView): Step[] {
  const params = { participantId: id };
  const { watched } = readiness;
  const to = (path: 'consent' | 'screening' | 'training' | 'equipment' | 'prescription'): Href => ({ pathname: `/participants/[participantId]/${path}`, params });
  return [
    { id: 'account', word: readiness.accountActive ? 'active' : state === 'invited' ? 'invited' : 'inactive', done: readiness.accountActive, href: null },
    { id: 'consent', word: readiness.consent, done: readiness.consent === 'current', href: to('consent') },
    { id: 'screening', word: readiness.screening, done: readiness.screening === 'clear', href: to('screening') },
    { id: 'training', word: readiness.training, done: readiness.training === 'signed_off', href: to('training') },
    { id: 'watched', word: watched.done >= watched.required ? 'done' : 'due', done: watched.done >= watched.required, href: to('training'), facts: { done: watched.done, required: watched.required } },
    { id: 'device', word: readiness.device ? 'assigned' : 'none', done: readiness.device !== null, href: to('equipment'), facts: { label: readiness.device?.label ?? '' } },
    { id: 'supplies', word: readiness.supplies > 0 ? 'given' : 'none', done: readiness.supplies > 0, href: to('equipment'), facts: { count: readiness.supplies } },
    { id: 'prescription', word: readiness.prescription, done: readiness.prescription === 'acknowledged', href: to('prescription') },
  ];
}

export function ReadinessCard({ person, writes }: { person: ParticipantView; writes: boolean }) {
  const { t } = useTranslation('participants');
  const { colour } = useTheme();
  const toast = useToast();
  const invite = useCall(inviteAgain);
  const steps = stepsOf(person);
  const open = steps.filter((step) => !step.done).length;
  return (
    <Card heading={t('ready.title')} note={open === 0 ? t('ready.all') : t('ready.open', { count: open })}>
      <View role="list">
        {steps.map((step) => {
          const tone: StateTone = step.done ? 'steady' : 'caution';
          return (
            <View
              role="listitem"
              key={step.id}
              style={{ flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: space[3], paddingVertical: space[2], borderTopWidth: stroke.hair, borderColor: colour.line }}
            >
              <View style={{ flexGrow: 1, flexShrink: 1, gap: space.half }}>
                <Text weight="bold">{t(`ready.step.${step.id}`)}</Text>
              </View>
              <Tag tone={tone} label={t(`ready.${step.id}.${step.word}`, step.facts ?? {})} />
              {writes && step.href ? (
                <ButtonLink kind="quiet" size="small" label={t(step.done ? 'ready.look' : 'ready.do')} accessibleLabel={t(step.done ? 'ready.lookWhich' : 'ready.doWhich', { step: t(`ready.step.${step.id}`) })} href={step.href} />
              ) : null}
              {writes && step.id === 'account' && !step.done && person.state === 'invited' ? (
                <Button
                  kind="quiet"
                  size="small"
                  label={t('ready.again')}
                  busy={invite.isPending}
                  onPress={() =>
                    invite.mutate(
                      { params: { participantId: person.id }, body: {} },
                      { onSuccess: () => toast.show({ text: t('ready.sentAgain'), tone: 'steady' }), onError: (error) => toast.show({ text: error.problem.detail, tone: 'stop' }) },
                    )
                  }
                />
              ) : null}
            </View>
          );
        })}
      </View>
    </Card>
  );
}
