/**
 * A strength from 0 to 10 as eleven buttons: nothing is preset, so an untouched scale is no answer. It must not become
 * a slider, which a trembling hand cannot set and which always shows a number.
 */
import { Pressable, View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { FieldMessages, useFieldWiring } from '@/components/ui/FieldFrame';
import { Text } from '@/components/ui/Text';
import { VisuallyHidden } from '@/components/ui/VisuallyHidden';
import { useRoving } from '@/components/ui/roving';
import { radius, space, stroke, touch, useTheme } from '@/components/ui/theme';

export interface ScaleInputProps {
  label: string;
  hideLabel?: boolean;
  hint?: string;
  error?: string;
  value: number | null;
  onChange(value: number): void;
  /** What 0 and 10 mean, in words. */
  lowLabel: string;
  highLabel: string;
  min?: number;
  max?: number;
  disabled?: boolean;
  testID?: string;
}

export function ScaleInput(props: ScaleInputProps) {
  const { value, onChange, min = 0, max = 10, lowLabel, highLabel, disabled } = props;
  const { t } = useTranslation('common');
  const theme = useTheme();
  const { colour } = theme;
  const wiring = useFieldWiring(props);
  const roving = useRoving();
  const steps = Array.from({ length: max - min + 1 }, (_, index) => min + index);
  const choose = (index: number) => {
    const step = steps[index];
    if (step === undefined || disabled) return;
    onChange(step);
    roving.focus(index);
  };
  return (
    <View style={{ gap: space[2] }} testID={props.testID}>
      <View style={{ flexDirection: 'row', flexWrap: 'wrap', alignItems: 'baseline', columnGap: space[3] }}>
        {props.hideLabel ? (
          <VisuallyHidden id={wiring.labelId}>{props.label}</VisuallyHidden>
        ) : (
          <View style={{ flexGrow: 1, flexShrink: 1 }}>
            <Text id={wiring.labelId} weight="bold">
              {props.label}
            </Text>
          </View>
        )}
        {value === null ? null : (
          <Text weight="bold" digits aria-hidden>
            {t('progress.of', { value, max })}
          </Text>
        )}
      </View>
      {props.hint ? (
        <Text id={`${wiring.controlId}-hint`} size="small" tone="muted">
          {props.hint}
        </Text>
      ) : null}
      <View
        role="radiogroup"
        aria-labelledby={wiring.labelId}
        aria-describedby={wiring.describedBy}
        aria-invalid={props.error ? true : undefined}
        style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[1] + space.half }}
      >
        {steps.map((step, index) => {
          const isChosen = step === value;
          const isBelow = value !== null && step < value;
          const meaning = step === min ? lowLabel : step === max ? highLabel : undefined;
          return (
            <Pressable
              key={step}
              ref={roving.ref(index)}
              role="radio"
              aria-checked={isChosen}
              aria-label={meaning ? t('scale.end', { value: step, meaning }) : String(step)}
              disabled={disabled}
              tabIndex={isChosen || (value === null && index === 0) ? 0 : -1}
              onPress={() => choose(index)}
              onKeyDown={(event) => {
                // A scale has ends: the arrows stop there and do not come out on the other side.
                const next = roving.next(event, index, steps.length);
                const isWrap = next !== null && event.key.startsWith('Arrow') && Math.abs(next - index) > 1;
                if (next === null) return;
                event.preventDefault();
                if (!isWrap) choose(next);
              }}
              style={({ hovered }) => ({
                minWidth: Math.max(touch.scale, theme.rem(2.75)),
                minHeight: Math.max(touch.scale, theme.rem(2.75)),
                alignItems: 'center',
                justifyContent: 'center',
                borderRadius: radius,
                borderWidth: stroke.firm,
                borderColor: isChosen || isBelow || hovered ? colour.action : colour.line,
                backgroundColor: isChosen ? colour.action : isBelow ? colour.actionTint : colour.raised,
              })}
            >
              <Text weight="bold" digits tone={isChosen ? 'onAction' : 'ink'}>
                {step}
              </Text>
            </Pressable>
          );
        })}
      </View>
      <View style={{ flexDirection: 'row', justifyContent: 'space-between', gap: space[4] }} aria-hidden>
        <Text size="small" tone="muted">
          {t('scale.end', { value: min, meaning: lowLabel })}
        </Text>
        <Text size="small" tone="muted" align="end">
          {t('scale.end', { value: max, meaning: highLabel })}
        </Text>
      </View>
      <FieldMessages wiring={wiring} error={props.error} />
    </View>
  );
}
