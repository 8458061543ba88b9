/**
 * One word for a state, with the shape of its tone. It must not be pressed and must not stand without its word.
 */
import { View } from 'react-native';
import { Icon, type IconName } from '@/components/ui/Icon';
import { Text } from '@/components/ui/Text';
import { radius, space, tintOf, useTheme, type StateTone } from '@/components/ui/theme';

export interface TagProps {
  tone?: StateTone;
  label: string;
  /** Leave the shape out where the row already shows one. */
  bare?: boolean;
}

const shapeOf: Record<StateTone, IconName> = {
  muted: 'none',
  action: 'info',
  steady: 'steady',
  caution: 'caution',
  stop: 'stop',
};

export function Tag({ tone = 'muted', label, bare }: TagProps) {
  const { colour, rem } = useTheme();
  return (
    // The outer row lets the tag keep its own width in a column and its place on the line in a row.
    <View style={{ flexDirection: 'row', maxWidth: '100%' }}>
      <View
        style={{
          flexDirection: 'row',
          alignItems: 'center',
          flexShrink: 1,
          gap: space[1] + space.half,
          paddingHorizontal: space[2],
          paddingVertical: space.half,
          borderRadius: radius / 2,
          backgroundColor: tintOf(colour, tone),
        }}
      >
        {bare ? null : <Icon name={shapeOf[tone]} tone={tone} size={rem(0.75)} />}
        <Text size="fine" weight="bold" tone={tone}>
          {label}
        </Text>
      </View>
    </View>
  );
}
