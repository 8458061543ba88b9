/**
 * One electrode: where it sits, how well it touches, and what to do if it does not. It must not show a number.
 */
import { View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { ContactMark, type ContactQuality } from '@/components/features/session/pictures/ContactMark';
import { usePlaceName } from '@/components/features/session/pictures/place-words';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Text } from '@/components/ui/Text';
import { space, useTheme } from '@/components/ui/theme';

export interface ContactCardProps {
  position: string;
  polarity: 'anode' | 'cathode';
  grade: ContactQuality;
  /** The wearer has wetted and pressed it. */
  onAttended?(): void;
}

export function ContactCard({ position, polarity, grade, onAttended }: ContactCardProps) {
  const { t } = useTranslation('device');
  const placeName = usePlaceName();
  const { rem } = useTheme();
  const name = placeName(position);
  return (
    <Card padding="close" edge={grade === 'good' ? undefined : grade === 'weak' ? 'caution' : 'stop'}>
      <View style={{ flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: space[3] }}>
        <View style={{ flexGrow: 1, flexShrink: 1, flexBasis: rem(9), minWidth: 0 }}>
          <Text weight="bold">{name}</Text>
          <Text size="small" tone="muted">
            {t(`lead.${polarity}`)}
          </Text>
        </View>
        <ContactMark quality={grade} />
      </View>
      {grade === 'good' || !onAttended ? null : (
        <View style={{ gap: space[2] }}>
          <Text size="small">{t(`contact.${grade}`)}</Text>
          <Button
            kind="secondary"
            grow
            label={t('contact.attended')}
            accessibleLabel={t('contact.attendedAt', { place: name })}
            onPress={onAttended}
          />
        </View>
      )}
    </Card>
  );
}
