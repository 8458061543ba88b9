/**
 * Open lockouts of a person, each with since when and the way to its review. A closed one stands in the timeline.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { useFormat } from '@/components/runtime/format';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import type { ParticipantView } from '@/shared/contracts/participant';

export function LockoutsCard({ person }: { person: ParticipantView }) {
  const { t } = useTranslation('participants');
  const format = useFormat(person.zone);
  const open = person.lockouts.filter((lockout) => lockout.closedAt === null);
  if (open.length === 0) return null;
  return (
    <View style={{ gap: space[3] }}>
      {open.map((lockout) => (
        <Notice key={lockout.id} tone={lockout.level === 'hold' || lockout.level === 'device' ? 'caution' : 'stop'} word={t('lockout.word')} title={t(`lockout.${lockout.level}`)}>
          <Text>{t(`worklist:why.${lockout.code}`)}</Text>
          <Text tone="muted">
            {lockout.until ? t('lockout.sinceUntil', { since: format.dayTime(lockout.openedAt), until: format.dayTime(lockout.until) }) : t('lockout.since', { since: format.dayTime(lockout.openedAt) })}
          </Text>
        </Notice>
      ))}
    </View>
  );
}
