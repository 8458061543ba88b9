/**
 * What the browser does better than anyone: a list to choose from, the pickers for day and time, and a label that leads
 * to its control when pressed. The controls must stand inside the field's box, which shows focus and error.
 */
import type { CSSProperties, ReactNode, Ref } from 'react';
import { View } from 'react-native';
import { Icon } from '@/components/ui/Icon';
import { fontFamily, space, useTheme, type Theme } from '@/components/ui/theme';

/** The ids that tie a control to its label, hint and error. */
export interface FieldWiring {
  controlId: string;
  labelId: string;
  describedBy: string | undefined;
}

interface ControlProps {
  wiring: FieldWiring;
  invalid: boolean;
  required?: boolean;
  disabled?: boolean;
  value: string;
  onChange(value: string): void;
  onFocusChange(focused: boolean): void;
}

function controlStyle({ colour, type, isDark }: Theme): CSSProperties {
  const { fontSize, lineHeight } = type('body');
  return {
    fontFamily,
    fontSize,
    lineHeight: `${lineHeight}px`,
    fontVariantNumeric: 'tabular-nums',
    color: colour.ink,
    colorScheme: isDark ? 'dark' : 'light',
    backgroundColor: 'transparent',
    border: 'none',
    outline: 'none',
    appearance: 'none',
    flex: 1,
    minWidth: 0,
    width: '100%',
    margin: 0,
    paddingBlock: space[2],
    paddingInlineStart: space[3],
  };
}

interface PageSelectProps extends ControlProps {
  options: readonly { value: string; label: string }[];
  placeholder?: string;
  canBeEmpty: boolean;
  inputRef?: Ref<HTMLSelectElement>;
}

export function PageSelect(props: PageSelectProps) {
  const theme = useTheme();
  return (
    <>
      <select
        ref={props.inputRef}
        id={props.wiring.controlId}
        aria-labelledby={props.wiring.labelId}
        aria-describedby={props.wiring.describedBy}
        aria-invalid={props.invalid || undefined}
        aria-required={props.required}
        disabled={props.disabled}
        value={props.value}
        onChange={(event) => props.onChange(event.target.value)}
        onFocus={() => props.onFocusChange(true)}
        onBlur={() => props.onFocusChange(false)}
        style={{ ...controlStyle(theme), paddingInlineEnd: space[10], cursor: 'pointer' }}
      >
        {props.canBeEmpty ? <option value="">{props.placeholder ?? ''}</option> : null}
        {props.options.map((option) => (
          <option key={option.value} value={option.value}>
            {option.label}
          </option>
        ))}
      </select>
      <View
        style={{
          position: 'absolute',
          end: space[3],
          top: space[0],
          bottom: space[0],
          justifyContent: 'center',
          pointerEvents: 'none',
        }}
      >
        <Icon name="down" tone="muted" />
      </View>
    </>
  );
}

interface PageInputProps extends ControlProps {
  kind: 'date' | 'time';
  min?: string;
  max?: string;
  inputRef?: Ref<HTMLInputElement>;
}

export function PageInput(props: PageInputProps) {
  const theme = useTheme();
  return (
    <input
      ref={props.inputRef}
      type={props.kind}
      id={props.wiring.controlId}
      aria-labelledby={props.wiring.labelId}
      aria-describedby={props.wiring.describedBy}
      aria-invalid={props.invalid || undefined}
      aria-required={props.required}
      disabled={props.disabled}
      value={props.value}
      min={props.min}
      max={props.max}
      onChange={(event) => props.onChange(event.target.value)}
      onFocus={() => props.onFocusChange(true)}
      onBlur={() => props.onFocusChange(false)}
      style={{ ...controlStyle(theme), paddingInlineEnd: space[3] }}
    />
  );
}

export function PageLabel({ controlId, children }: { controlId: string; children: ReactNode }) {
  return <label htmlFor={controlId}>{children}</label>;
}

/** Leads past the navigation to the content; seen only while it has the focus (style sheet, `.skip-link`). */
export function PageAnchor({ targetId, children }: { targetId: string; children: ReactNode }) {
  return (
    <a
      className="skip-link"
      href={`#${targetId}`}
      onClick={(event) => {
        // The address stays as it is: a mark behind it would be taken for a new page.
        event.preventDefault();
        const target = document.getElementById(targetId);
        target?.setAttribute('tabindex', '-1');
        target?.focus();
      }}
    >
      {children}
    </a>
  );
}
