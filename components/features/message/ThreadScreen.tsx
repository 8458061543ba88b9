/**
 * Messages with one participant, as staff see them.
 */
import { useLocalSearchParams } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { StaffShell } from '@/components/layout/StaffShell';
import { useRead } from '@/components/runtime/api';
import { readParticipant } from '@/shared/contracts/participant';
import { Thread } from './Thread';

const readingRem = 44;

export function ThreadScreen() {
  const { t } = useTranslation('messages');
  const { participantId = '' } = useLocalSearchParams<{ participantId: string }>();
  const person = useRead(readParticipant, { params: { participantId } });
  const name = person.data?.name ?? '';
  return (
    <StaffShell
      title={t('staffTitle', { name })}
      place="participants"
      maxRem={readingRem}
      crumbs={[
        { label: t('common:nav.participants'), href: '/participants' },
        { label: name, href: { pathname: '/participants/[participantId]', params: { participantId } } },
      ]}
    >
      <Thread participantId={participantId} />
    </StaffShell>
  );
}
