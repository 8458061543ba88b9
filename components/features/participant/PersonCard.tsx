/**
 * How to reach a person and theirs, who helps them, pausing the course, and withdrawing. For those who may know the name.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { useCall } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Definition } from '@/components/ui/Definition';
import { Dialog } from '@/components/ui/Dialog';
import { TextField } from '@/components/ui/Field';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { pauseCourse } from '@/shared/contracts/course';
import { withdrawParticipant, type ParticipantView } from '@/shared/contracts/participant';

type Act = 'pause' | 'resume' | 'withdraw';

export function PersonCard({ person, writes }: { person: ParticipantView; writes: boolean }) {
  const { t } = useTranslation('participants');
  const me = useMe();
  const format = useFormat(person.zone);
  const [act, setAct] = useState<Act | null>(null);
  const { contact, course } = person;
  if (!contact) return null;
  const isPaused = course?.state === 'paused';
  return (
    <Card heading={t('person')}>
      <View style={{ gap: space[4] }}>
        <Definition
          layout="rows"
          rows={[
            { label: t('email'), value: contact.email },
            { label: t('phone'), value: contact.phone },
            { label: t('bornOn'), value: format.date(contact.bornOn) },
            { label: t('emergency'), value: t('page.contact', { name: contact.emergencyContact.name, phone: contact.emergencyContact.phone }) },
            { label: t('page.caregivers'), value: person.caregivers.map((caregiver) => caregiver.name).join(', ') || t('none') },
            { label: t('page.enrolled'), value: format.day(person.enrolledAt) },
          ]}
        />
        {writes && person.withdrawnAt === null ? (
          <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[3] }}>
            {me?.account.role === 'clinician' && course && (course.state === 'active' || isPaused) ? (
              <Button kind="secondary" size="small" label={t(isPaused ? 'page.resume' : 'page.pause')} onPress={() => setAct(isPaused ? 'resume' : 'pause')} />
            ) : null}
            <Button kind="quiet" size="small" label={t('page.withdraw')} onPress={() => setAct('withdraw')} />
          </View>
        ) : null}
      </View>
      {act ? <ActDialog act={act} person={person} onClose={() => setAct(null)} /> : null}
    </Card>
  );
}

function ActDialog({ act, person, onClose }: { act: Act; person: ParticipantView; onClose(): void }) {
  const { t } = useTranslation('participants');
  const pause = useCall(pauseCourse);
  const withdraw = useCall(withdrawParticipant);
  const [reason, setReason] = useState('');
  const failed = pause.error ?? withdraw.error;
  const busy = pause.isPending || withdraw.isPending;
  const go = () => {
    const done = { onSuccess: onClose };
    if (act === 'withdraw') withdraw.mutate({ params: { participantId: person.id }, body: { reason } }, done);
    else if (person.course) pause.mutate({ params: { courseId: person.course.id }, body: { paused: act === 'pause', reason } }, done);
  };
  return (
    <Dialog
      open
      title={t(`act.${act}.title`, { name: person.name })}
      onClose={onClose}
      busy={busy}
      actions={
        <>
          <Button kind="secondary" label={t('act.back')} onPress={onClose} />
          <Button kind={act === 'resume' ? 'primary' : 'danger'} label={t(`act.${act}.go`)} busy={busy} disabled={reason.trim() === ''} onPress={go} />
        </>
      }
    >
      <View style={{ gap: space[4] }}>
        {failed ? <Notice tone="stop" title={failed.offline ? t('offline') : failed.problem.detail} announce="assertive" /> : null}
        <Text>{t(`act.${act}.help`)}</Text>
        <TextField label={t('act.reason')} value={reason} onChange={setReason} autoComplete="off" />
      </View>
    </Dialog>
  );
}
