/**
 * How well an electrode touches: three dots, filled as far as it does, and the word. It must not show a number: ohms
 * mean nothing at a kitchen table.
 */
import { View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Text } from '@/components/ui/Text';
import { pill, radius, space, stroke, tintOf, useTheme, type StateTone } from '@/components/ui/theme';

export type ContactQuality = 'good' | 'weak' | 'none';

export interface ContactMarkProps {
  quality: ContactQuality;
  /** In place of the word from `common:contact`. */
  word?: string;
}

const dotsOf: Record<ContactQuality, number> = { good: 3, weak: 1, none: 0 };
const toneOf: Record<ContactQuality, StateTone> = { good: 'steady', weak: 'caution', none: 'stop' };

export function ContactMark({ quality, word }: ContactMarkProps) {
  const { t } = useTranslation('common');
  const { colour, rem } = useTheme();
  const tone = toneOf[quality];
  const side = rem(0.5);
  return (
    <View style={{ flexDirection: 'row' }}>
      <View
        style={{
          flexDirection: 'row',
          alignItems: 'center',
          gap: space[1],
          paddingHorizontal: space[2] + space.half,
          paddingVertical: space[1],
          borderRadius: radius / 2,
          backgroundColor: tintOf(colour, tone),
        }}
      >
        <View role="img" aria-hidden style={{ flexDirection: 'row', gap: space[1] }}>
          {[0, 1, 2].map((index) => (
            <View
              key={index}
              style={{
                width: side,
                height: side,
                borderRadius: pill,
                borderWidth: stroke.hair,
                borderColor: colour[tone],
                backgroundColor: index < dotsOf[quality] ? colour[tone] : 'transparent',
              }}
            />
          ))}
        </View>
        <View style={{ paddingStart: space[1] }}>
          <Text size="fine" weight="bold" tone={tone}>
            {word ?? t(`contact.${quality}`)}
          </Text>
        </View>
      </View>
    </View>
  );
}
