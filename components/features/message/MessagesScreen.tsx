/**
 * The participant's messages with the team.
 */
import { useTranslation } from 'react-i18next';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { useMe } from '@/components/runtime/me';
import { Notice } from '@/components/ui/Notice';
import { Thread } from './Thread';

export function MessagesScreen() {
  const { t } = useTranslation('messages');
  const site = useMe()?.sites[0];
  return (
    <ParticipantShell title={t('title')} tab="help">
      <Notice tone="caution" title={t('notAtOnce')}>
        {site ? t('urgent', { number: site.emergencyNumber, name: site.name, phone: site.phone }) : t('urgentLocal')}
      </Notice>
      <Thread />
    </ParticipantShell>
  );
}
