/**
 * The fields: text, number with its unit, choice from a list, check box, day, time, password, long text; each with
 * label, hint and error tied to it. They must not check what is written: the contract's schema does.
 */
import { useState, type ReactNode, type RefCallback } from 'react';
import { Pressable, TextInput, View, type KeyboardTypeOptions, type TextStyle, type ViewStyle } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Icon } from '@/components/ui/Icon';
import { Text } from '@/components/ui/Text';
import { FieldFrame, FieldMessages, useFieldWiring, type FieldProps } from '@/components/ui/FieldFrame';
import { PageInput, PageSelect } from '@/components/ui/page-controls';
import { fontFamily, radius, space, stroke, useTheme, type Theme } from '@/components/ui/theme';

export type { FieldProps } from '@/components/ui/FieldFrame';

/** What can take the focus; react-hook-form keeps these to go to the first wrong field. */
export interface Focusable {
  focus(): void;
}

/** The box around a control: one look for all of them. */
function boxStyle(theme: Theme, state: { error?: string; disabled?: boolean; focused?: boolean }): ViewStyle {
  const { colour } = theme;
  return {
    flexDirection: 'row',
    alignItems: 'stretch',
    minHeight: Math.max(theme.touch, theme.rem(theme.density === 'reading' ? 3.25 : 2.5)),
    borderRadius: radius,
    borderWidth: state.error || state.focused ? stroke.firm : stroke.hair,
    // The box keeps its outer size when its line grows firmer.
    padding: state.error || state.focused ? space[0] : stroke.hair,
    borderColor: state.error ? colour.stop : state.focused ? colour.action : colour.muted,
    backgroundColor: state.disabled ? colour.sunken : colour.raised,
  };
}

function inputStyle(theme: Theme): TextStyle {
  return {
    ...theme.type('body'),
    fontFamily,
    color: theme.colour.ink,
    flex: 1,
    minWidth: 0,
    paddingHorizontal: space[3],
    paddingVertical: space[2],
    // The box around it shows the focus.
    outline: 'none',
  };
}

export interface TextFieldProps extends FieldProps {
  value: string;
  onChange(value: string): void;
  onBlur?(): void;
  onSubmit?(): void;
  placeholder?: string;
  keyboard?: KeyboardTypeOptions;
  autoComplete?: 'email' | 'name' | 'tel' | 'one-time-code' | 'username' | 'off';
  maxLength?: number;
  /** Stands inside the box, at its end: a unit, a key hint, a button. */
  trailing?: ReactNode;
  autoFocus?: boolean;
  inputRef?: RefCallback<Focusable>;
}

interface PlainInputProps extends TextFieldProps {
  secure?: 'current-password' | 'new-password';
  rows?: number;
  digits?: boolean;
}

function PlainInput(props: PlainInputProps) {
  const theme = useTheme();
  const wiring = useFieldWiring(props);
  const [isFocused, setFocused] = useState(false);
  const rows = props.rows ?? 1;
  return (
    <FieldFrame {...props} wiring={wiring}>
      <View style={boxStyle(theme, { error: props.error, disabled: props.disabled, focused: isFocused })}>
        <TextInput
          ref={props.inputRef}
          id={wiring.controlId}
          aria-labelledby={wiring.labelId}
          aria-describedby={wiring.describedBy}
          aria-invalid={props.error ? true : undefined}
          aria-required={props.required}
          value={props.value}
          onChangeText={props.onChange}
          onFocus={() => setFocused(true)}
          onBlur={() => {
            setFocused(false);
            props.onBlur?.();
          }}
          onSubmitEditing={props.onSubmit}
          editable={!props.disabled}
          placeholder={props.placeholder}
          placeholderTextColor={theme.colour.muted}
          keyboardType={props.keyboard}
          autoComplete={props.secure ?? props.autoComplete ?? 'off'}
          autoCapitalize={props.secure || props.keyboard === 'email-address' ? 'none' : 'sentences'}
          autoFocus={props.autoFocus}
          maxLength={props.maxLength}
          secureTextEntry={props.secure !== undefined}
          multiline={rows > 1}
          numberOfLines={rows > 1 ? rows : undefined}
          style={[inputStyle(theme), props.digits ? { fontVariant: ['tabular-nums'] } : null]}
        />
        {props.trailing ? (
          <View style={{ justifyContent: 'center', paddingEnd: space[3] }}>{props.trailing}</View>
        ) : null}
      </View>
    </FieldFrame>
  );
}

export function TextField(props: TextFieldProps) {
  return <PlainInput {...props} />;
}

export interface TextAreaFieldProps extends Omit<TextFieldProps, 'trailing' | 'onSubmit'> {
  rows?: number;
}

export function TextAreaField({ rows = 4, ...props }: TextAreaFieldProps) {
  return <PlainInput {...props} rows={rows} />;
}

export interface PasswordFieldProps extends Omit<TextFieldProps, 'trailing' | 'autoComplete' | 'keyboard'> {
  /** `new-password` where one is being chosen, so that the browser offers a strong one. */
  purpose?: 'current-password' | 'new-password';
}

export function PasswordField({ purpose = 'current-password', ...props }: PasswordFieldProps) {
  const { t } = useTranslation('common');
  const [isShown, setShown] = useState(false);
  return (
    <PlainInput
      {...props}
      secure={isShown ? undefined : purpose}
      trailing={
        <Pressable
          role="button"
          aria-pressed={isShown}
          onPress={() => setShown(!isShown)}
          style={{ padding: space[2], flexDirection: 'row', alignItems: 'center', gap: space[1] }}
        >
          <Icon name={isShown ? 'eyeClosed' : 'eye'} tone="action" />
          <Text size="fine" weight="bold" tone="action">
            {isShown ? t('field.hidePassword') : t('field.showPassword')}
          </Text>
        </Pressable>
      }
    />
  );
}

export interface NumberFieldProps extends FieldProps {
  /** null = empty or not a number; unknown is never a number. */
  value: number | null;
  onChange(value: number | null): void;
  onBlur?(): void;
  /** Always shown: every number has its unit. */
  unit?: string;
  inputRef?: RefCallback<Focusable>;
  onSubmit?(): void;
  autoFocus?: boolean;
}

/** Reads what people write: a comma or a point as decimal mark. Anything else is no number. */
export function readNumber(written: string): number | null {
  const plain = written.trim().replace(',', '.').replace('−', '-');
  return /^-?\d+(\.\d+)?$|^-?\.\d+$/.test(plain) ? Number(plain) : null;
}

export function NumberField({ value, onChange, unit, ...props }: NumberFieldProps) {
  const { t } = useTranslation('common');
  const [written, setWritten] = useState(value === null ? '' : String(value));
  const [isWriting, setWriting] = useState(false);
  // While being written, the text is the person's; otherwise it follows the value, which may change from outside.
  const shown =
    isWriting || (value === null && readNumber(written) === null) ? written : value === null ? '' : String(value);
  const unreadable =
    !isWriting && shown.trim() !== '' && readNumber(shown) === null ? t('errors.not_a_number') : undefined;
  return (
    <PlainInput
      {...props}
      error={props.error ?? unreadable}
      value={shown}
      digits
      keyboard="decimal-pad"
      onChange={(next) => {
        setWriting(true);
        setWritten(next);
        onChange(readNumber(next));
      }}
      onBlur={() => {
        setWriting(false);
        props.onBlur?.();
      }}
      trailing={
        unit ? (
          <Text size="small" tone="muted">
            {unit}
          </Text>
        ) : undefined
      }
    />
  );
}

export interface Option<T extends string = string> {
  value: T;
  label: string;
}

export interface SelectFieldProps<T extends string = string> extends FieldProps {
  value: T | '';
  onChange(value: T | ''): void;
  onBlur?(): void;
  options: readonly Option<T>[];
  /** Shown while nothing is chosen; also offered to choose nothing when `optional`. */
  placeholder?: string;
  inputRef?: RefCallback<Focusable>;
}

export function SelectField<T extends string>({ options, placeholder, ...props }: SelectFieldProps<T>) {
  const theme = useTheme();
  const wiring = useFieldWiring(props);
  const [isFocused, setFocused] = useState(false);
  return (
    <FieldFrame {...props} wiring={wiring}>
      <View style={boxStyle(theme, { error: props.error, disabled: props.disabled, focused: isFocused })}>
        <PageSelect
          wiring={wiring}
          invalid={Boolean(props.error)}
          required={props.required}
          disabled={props.disabled}
          value={props.value}
          options={options}
          placeholder={placeholder ?? (props.value === '' ? '' : undefined)}
          canBeEmpty={Boolean(props.optional) || props.value === ''}
          onChange={(next) => props.onChange(options.find((option) => option.value === next)?.value ?? '')}
          onFocusChange={(focused) => {
            setFocused(focused);
            if (!focused) props.onBlur?.();
          }}
          inputRef={props.inputRef}
        />
      </View>
    </FieldFrame>
  );
}

export interface DateFieldProps extends FieldProps {
  /** `YYYY-MM-DD`, or '' */
  value: string;
  onChange(value: string): void;
  onBlur?(): void;
  min?: string;
  max?: string;
  inputRef?: RefCallback<Focusable>;
}

function PickedField({ kind, ...props }: DateFieldProps & { kind: 'date' | 'time' }) {
  const theme = useTheme();
  const wiring = useFieldWiring(props);
  const [isFocused, setFocused] = useState(false);
  return (
    <FieldFrame {...props} wiring={wiring}>
      <View style={boxStyle(theme, { error: props.error, disabled: props.disabled, focused: isFocused })}>
        <PageInput
          kind={kind}
          wiring={wiring}
          invalid={Boolean(props.error)}
          required={props.required}
          disabled={props.disabled}
          value={props.value}
          min={props.min}
          max={props.max}
          onChange={props.onChange}
          onFocusChange={(focused) => {
            setFocused(focused);
            if (!focused) props.onBlur?.();
          }}
          inputRef={props.inputRef}
        />
      </View>
    </FieldFrame>
  );
}

export function DateField(props: DateFieldProps) {
  return <PickedField {...props} kind="date" />;
}

export interface TimeFieldProps extends DateFieldProps {
  /** `HH:MM` of 24 hours, or '' */
  value: string;
}

export function TimeField(props: TimeFieldProps) {
  return <PickedField {...props} kind="time" />;
}

export interface CheckboxFieldProps extends Omit<FieldProps, 'hideLabel' | 'optional'> {
  value: boolean;
  onChange(value: boolean): void;
  onBlur?(): void;
  inputRef?: RefCallback<Focusable>;
}

export function CheckboxField({ value, onChange, ...props }: CheckboxFieldProps) {
  const theme = useTheme();
  const { colour } = theme;
  const wiring = useFieldWiring(props);
  const side = theme.rem(theme.density === 'reading' ? 1.5 : 1.25);
  return (
    <View style={{ gap: space[1] }} testID={props.testID}>
      <Pressable
        ref={props.inputRef}
        role="checkbox"
        aria-checked={value}
        aria-labelledby={wiring.labelId}
        aria-describedby={wiring.describedBy}
        aria-invalid={props.error ? true : undefined}
        aria-required={props.required}
        disabled={props.disabled}
        onPress={() => onChange(!value)}
        onBlur={props.onBlur}
        style={{
          flexDirection: 'row',
          alignItems: 'center',
          gap: space[3],
          minHeight: theme.touch,
          borderRadius: radius,
        }}
      >
        <View
          style={{
            width: side,
            height: side,
            flexShrink: 0,
            borderRadius: radius / 2,
            borderWidth: stroke.firm,
            borderColor: props.error ? colour.stop : value ? colour.action : colour.muted,
            backgroundColor: value ? colour.action : colour.raised,
            alignItems: 'center',
            justifyContent: 'center',
          }}
        >
          {value ? <Icon name="tick" tone="onAction" size={side * 0.7} /> : null}
        </View>
        <View style={{ flex: 1, minWidth: 0 }}>
          <Text id={wiring.labelId} tone={props.disabled ? 'muted' : 'ink'}>
            {props.label}
          </Text>
          {props.hint ? (
            <Text id={`${wiring.controlId}-hint`} size="small" tone="muted">
              {props.hint}
            </Text>
          ) : null}
        </View>
      </Pressable>
      <FieldMessages wiring={wiring} error={props.error} />
    </View>
  );
}
