/**
 * Something that is on or off and takes effect at once. It must not stand in a form that is sent later: a check box
 * does.
 */
import { useId } from 'react';
import { Pressable, View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Text } from '@/components/ui/Text';
import { pill, radius, space, stroke, useTheme } from '@/components/ui/theme';

export interface SwitchProps {
  label: string;
  hint?: string;
  value: boolean;
  onChange(value: boolean): void;
  disabled?: boolean;
  testID?: string;
}

export function Switch({ label, hint, value, onChange, disabled, testID }: SwitchProps) {
  const { t } = useTranslation('common');
  const { colour, rem, touch } = useTheme();
  const id = useId();
  const height = rem(1.5);
  return (
    <Pressable
      role="switch"
      aria-checked={value}
      aria-labelledby={`${id}-label`}
      aria-describedby={hint ? `${id}-hint` : undefined}
      disabled={disabled}
      onPress={() => onChange(!value)}
      testID={testID}
      style={{
        flexDirection: 'row',
        flexWrap: 'wrap',
        alignItems: 'center',
        columnGap: space[4],
        minHeight: touch,
        borderRadius: radius,
      }}
    >
      <View style={{ flexGrow: 1, flexShrink: 1, flexBasis: rem(9), minWidth: 0 }}>
        <Text id={`${id}-label`} tone={disabled ? 'muted' : 'ink'}>
          {label}
        </Text>
        {hint ? (
          <Text id={`${id}-hint`} size="small" tone="muted">
            {hint}
          </Text>
        ) : null}
      </View>
      <Text size="small" weight="bold" tone={value && !disabled ? 'action' : 'muted'} aria-hidden>
        {value ? t('switch.on') : t('switch.off')}
      </Text>
      <View
        style={{
          width: height * 1.8,
          height,
          borderRadius: pill,
          borderWidth: stroke.firm,
          borderColor: value && !disabled ? colour.action : colour.muted,
          backgroundColor: value && !disabled ? colour.action : colour.sunken,
          padding: space.half,
          flexDirection: 'row',
          justifyContent: value ? 'flex-end' : 'flex-start',
        }}
      >
        <View
          style={{
            aspectRatio: 1,
            height: '100%',
            borderRadius: pill,
            backgroundColor: value && !disabled ? colour.onAction : colour.muted,
          }}
        />
      </View>
    </Pressable>
  );
}
