/**
 * One answer of several as large cards (`Choice`), or any number of short ones as chips (`Chips`). They must not say
 * what an answer leads to; the screen shows that beside them.
 */
import { useId } from 'react';
import { Pressable, View } from 'react-native';
import { FieldMessages, useFieldWiring } from '@/components/ui/FieldFrame';
import { Icon } from '@/components/ui/Icon';
import { Text } from '@/components/ui/Text';
import { VisuallyHidden } from '@/components/ui/VisuallyHidden';
import { useRoving } from '@/components/ui/roving';
import { pill, radius, space, stroke, useTheme } from '@/components/ui/theme';

export interface ChoiceOption<T extends string = string> {
  value: T;
  label: string;
  hint?: string;
}

interface GroupProps<T extends string> {
  label: string;
  /** Where the page's heading already asks the question. */
  hideLabel?: boolean;
  hint?: string;
  error?: string;
  options: readonly ChoiceOption<T>[];
  disabled?: boolean;
  testID?: string;
}

export interface ChoiceProps<T extends string = string> extends GroupProps<T> {
  value: T | null;
  onChange(value: T): void;
}

function GroupHead({
  label,
  hideLabel,
  hint,
  labelId,
  hintId,
}: {
  label: string;
  hideLabel?: boolean;
  hint?: string;
  labelId: string;
  hintId: string;
}) {
  return (
    <>
      {hideLabel ? (
        <VisuallyHidden id={labelId}>{label}</VisuallyHidden>
      ) : (
        <Text id={labelId} size="body" weight="bold">
          {label}
        </Text>
      )}
      {hint ? (
        <Text id={hintId} size="small" tone="muted">
          {hint}
        </Text>
      ) : null}
    </>
  );
}

/** Round mark of a radio button: ring, and a dot when chosen. */
function RadioMark({ isChosen }: { isChosen: boolean }) {
  const { colour, rem } = useTheme();
  const side = rem(1.5);
  return (
    <View
      style={{
        width: side,
        height: side,
        flexShrink: 0,
        borderRadius: pill,
        borderWidth: isChosen ? side * 0.32 : stroke.firm,
        borderColor: isChosen ? colour.action : colour.muted,
        backgroundColor: colour.raised,
      }}
    />
  );
}

export function Choice<T extends string>(props: ChoiceProps<T>) {
  const { options, value, onChange, disabled } = props;
  const theme = useTheme();
  const { colour } = theme;
  const wiring = useFieldWiring(props);
  const roving = useRoving();
  const chosenIndex = options.findIndex((option) => option.value === value);
  const choose = (index: number) => {
    const option = options[index];
    if (!option || disabled) return;
    onChange(option.value);
    roving.focus(index);
  };
  return (
    <View
      role="radiogroup"
      aria-labelledby={wiring.labelId}
      aria-describedby={wiring.describedBy}
      aria-invalid={props.error ? true : undefined}
      testID={props.testID}
      style={{ gap: space[3] }}
    >
      <GroupHead {...props} labelId={wiring.labelId} hintId={`${wiring.controlId}-hint`} />
      {options.map((option, index) => {
        const isChosen = index === chosenIndex;
        return (
          <Pressable
            key={option.value}
            ref={roving.ref(index)}
            role="radio"
            aria-checked={isChosen}
            disabled={disabled}
            tabIndex={isChosen || (chosenIndex < 0 && index === 0) ? 0 : -1}
            onPress={() => choose(index)}
            onKeyDown={(event) => {
              const next = roving.next(event, index, options.length);
              if (next !== null) event.preventDefault();
              if (next !== null) choose(next);
              else if (event.key === ' ') event.preventDefault();
            }}
            style={({ hovered, pressed }) => ({
              flexDirection: 'row',
              alignItems: 'center',
              gap: space[4],
              minHeight: theme.rem(theme.density === 'reading' ? 3.75 : 3),
              paddingHorizontal: space[4],
              paddingVertical: space[2],
              borderRadius: radius,
              borderWidth: stroke.firm,
              borderColor: isChosen || hovered ? colour.action : colour.line,
              backgroundColor: isChosen || pressed ? colour.actionTint : colour.raised,
            })}
          >
            <RadioMark isChosen={isChosen} />
            <View style={{ flex: 1, minWidth: 0 }}>
              <Text weight={isChosen ? 'bold' : 'regular'}>{option.label}</Text>
              {option.hint ? (
                <Text size="small" tone={isChosen ? 'ink' : 'muted'}>
                  {option.hint}
                </Text>
              ) : null}
            </View>
          </Pressable>
        );
      })}
      <FieldMessages wiring={wiring} error={props.error} />
    </View>
  );
}

export interface ChipsProps<T extends string = string> extends GroupProps<T> {
  values: readonly T[];
  onChange(values: T[]): void;
  /** Answers that stand alone, such as "Nothing": choosing one lifts the others, and the other way round. */
  exclusive?: readonly T[];
}

export function Chips<T extends string>(props: ChipsProps<T>) {
  const { options, values, onChange, exclusive = [], disabled } = props;
  const theme = useTheme();
  const { colour } = theme;
  const wiring = useFieldWiring(props);
  const hintId = useId();
  const toggle = (value: T) => {
    if (values.includes(value)) return onChange(values.filter((kept) => kept !== value));
    if (exclusive.includes(value)) return onChange([value]);
    return onChange([...values.filter((kept) => !exclusive.includes(kept)), value]);
  };
  return (
    <View
      role="group"
      aria-labelledby={wiring.labelId}
      aria-describedby={wiring.describedBy}
      testID={props.testID}
      style={{ gap: space[3] }}
    >
      <GroupHead {...props} labelId={wiring.labelId} hintId={props.hint ? `${wiring.controlId}-hint` : hintId} />
      <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: theme.density === 'reading' ? space[3] : space[2] }}>
        {options.map((option) => {
          const isChosen = values.includes(option.value);
          return (
            <Pressable
              key={option.value}
              role="checkbox"
              aria-checked={isChosen}
              disabled={disabled}
              onPress={() => toggle(option.value)}
              style={({ hovered, pressed }) => ({
                flexDirection: 'row',
                alignItems: 'center',
                gap: space[2],
                minHeight: Math.max(theme.touch, theme.rem(theme.density === 'reading' ? 3.25 : 2.25)),
                paddingHorizontal: space[4],
                paddingVertical: space[1],
                maxWidth: '100%',
                borderRadius: radius,
                borderWidth: stroke.firm,
                borderColor: isChosen || hovered ? colour.action : colour.line,
                backgroundColor: isChosen || pressed ? colour.actionTint : colour.raised,
              })}
            >
              {isChosen ? <Icon name="tick" tone="action" /> : null}
              <View style={{ flexShrink: 1 }}>
                <Text weight={isChosen ? 'bold' : 'regular'}>{option.label}</Text>
              </View>
            </Pressable>
          );
        })}
      </View>
      <FieldMessages wiring={wiring} error={props.error} />
    </View>
  );
}
