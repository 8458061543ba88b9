/**
 * Which key does it, and what it does. For people who work by keyboard; it must not be the only way to learn that.
 */
import { View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { radius, space, useTheme } from '@/components/ui/theme';

export interface KeyHintProps {
  keys: string | readonly string[];
  label?: string;
}

export function KeyHint({ keys, label }: KeyHintProps) {
  const { colour } = useTheme();
  const all = typeof keys === 'string' ? [keys] : keys;
  return (
    <View style={{ flexDirection: 'row', alignItems: 'center', gap: space[1] + space.half }}>
      {all.map((key) => (
        <View
          key={key}
          style={{
            paddingHorizontal: space[2],
            paddingVertical: space.half,
            borderRadius: radius / 2,
            backgroundColor: colour.sunken,
          }}
        >
          <Text size="fine" weight="bold" tone="muted">
            {key}
          </Text>
        </View>
      ))}
      {label ? (
        <Text size="fine" tone="muted">
          {label}
        </Text>
      ) : null}
    </View>
  );
}
