/**
 * The run as a picture: the trapezoid filled up to now with its notches, and the contact of each electrode. It draws what it is given.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { ContactCard } from '@/components/features/session/pictures/ContactCard';
import { ContactMark } from '@/components/features/session/pictures/ContactMark';
import { usePlaceName } from '@/components/features/session/pictures/place-words';
import { Trapezoid, type TrapezoidState } from '@/components/features/session/pictures/Trapezoid';
import type { DeviceSession, ElectrodeContact } from '@/components/runtime/device/stimulator';
import { Card } from '@/components/ui/Card';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import type { RunPicture } from './run-view';

function stateOf(picture: RunPicture, session: DeviceSession): TrapezoidState {
  if (picture.isOver) return session.endedWhy === 'complete' ? 'done' : 'stopped';
  return session.snapshot.state === 'paused' ? 'paused' : 'running';
}

export function RunTrapezoid({ picture, session }: { picture: RunPicture; session: DeviceSession }) {
  const { t } = useTranslation('session');
  const minutes = Math.round(picture.totalMinutes);
  return (
    <Trapezoid
      {...session.dose}
      size="hero"
      state={stateOf(picture, session)}
      filledSeconds={picture.filledSeconds}
      pauses={picture.notches}
      label={t('run.picture', { minutes, done: Math.floor(picture.filledSeconds / 60), count: picture.notches.length })}
      axis={{
        start: t('run.axisStart'),
        middle: picture.pausedSeconds > 0 ? t('run.axisPaused', { seconds: picture.pausedSeconds }) : undefined,
        end: t('run.axisEnd', { minutes }),
      }}
    />
  );
}

/** Good contact is one quiet line each; anything else says what to do. */
export function RunContacts({
  contacts,
  onAttended,
}: {
  contacts: readonly ElectrodeContact[];
  onAttended(position: string): void;
}) {
  const placeName = usePlaceName();
  if (contacts.some(({ grade }) => grade !== 'good')) {
    return (
      <View style={{ gap: space[3] }}>
        {contacts.map((contact) => (
          <ContactCard key={contact.position} {...contact} onAttended={() => onAttended(contact.position)} />
        ))}
      </View>
    );
  }
  return (
    <Card padding="close">
      {contacts.map(({ position, grade }) => (
        <View key={position} style={{ flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: space[3] }}>
          <Text grow>{placeName(position)}</Text>
          <ContactMark quality={grade} />
        </View>
      ))}
    </Card>
  );
}
