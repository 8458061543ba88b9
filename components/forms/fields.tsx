/**
 * The fields of components/ui tied to a form: name and control in place of value, change and error. They must not add
 * anything to what the fields show.
 */
import { useController, type Control, type FieldPath, type FieldValues } from 'react-hook-form';
import { Choice, type ChoiceProps } from '@/components/ui/Choice';
import {
  CheckboxField,
  DateField,
  NumberField,
  PasswordField,
  SelectField,
  TextAreaField,
  TextField,
  TimeField,
  type CheckboxFieldProps,
  type DateFieldProps,
  type NumberFieldProps,
  type PasswordFieldProps,
  type SelectFieldProps,
  type TextAreaFieldProps,
  type TextFieldProps,
  type TimeFieldProps,
} from '@/components/ui/Field';

/** What ties a field to its form. `T` is the form's output, which no field needs to know. */
interface Tie<V extends FieldValues, T> {
  name: FieldPath<V>;
  control: Control<V, unknown, T>;
}
type Wired = 'value' | 'values' | 'onChange' | 'onBlur' | 'inputRef' | 'error';
export type Tied<P, V extends FieldValues, T> = Omit<P, Wired> & Tie<V, T>;

/** What an empty field hands to the schema: '' (the usual), nothing at all, or null, as the contract wants it. */
interface MayBeEmpty {
  emptyAs?: 'text' | 'null' | 'absent';
}

function emptied(written: string, emptyAs: MayBeEmpty['emptyAs']): string | null | undefined {
  if (written !== '' || emptyAs === undefined || emptyAs === 'text') return written;
  return emptyAs === 'null' ? null : undefined;
}

function useTied<V extends FieldValues, T>({ name, control }: Tie<V, T>) {
  const { field, fieldState } = useController<V, FieldPath<V>, T>({ name, control });
  const held: unknown = field.value;
  // The controller passes on whatever it is given; the schema says later whether it may stand.
  const change: (value: unknown) => void = field.onChange;
  return { held, change, onBlur: field.onBlur, ref: field.ref, error: fieldState.error?.message };
}

const asText = (held: unknown) => (typeof held === 'string' ? held : '');

export function FormTextField<V extends FieldValues, T>({
  name,
  control,
  emptyAs,
  ...rest
}: Tied<TextFieldProps, V, T> & MayBeEmpty) {
  const { held, change, onBlur, ref, error } = useTied({ name, control });
  return (
    <TextField
      {...rest}
      value={asText(held)}
      onChange={(written) => change(emptied(written, emptyAs))}
      onBlur={onBlur}
      inputRef={ref}
      error={error}
    />
  );
}

export function FormTextAreaField<V extends FieldValues, T>({
  name,
  control,
  emptyAs,
  ...rest
}: Tied<TextAreaFieldProps, V, T> & MayBeEmpty) {
  const { held, change, onBlur, ref, error } = useTied({ name, control });
  return (
    <TextAreaField
      {...rest}
      value={asText(held)}
      onChange={(written) => change(emptied(written, emptyAs))}
      onBlur={onBlur}
      inputRef={ref}
      error={error}
    />
  );
}

export function FormPasswordField<V extends FieldValues, T>({
  name,
  control,
  ...rest
}: Tied<PasswordFieldProps, V, T>) {
  const { held, change, onBlur, ref, error } = useTied({ name, control });
  return (
    <PasswordField {...rest} value={asText(held)} onChange={change} onBlur={onBlur} inputRef={ref} error={error} />
  );
}

export interface FormNumberExtra {
  /** The contract's whole unit in one shown unit: 1000 for a field in mA whose contract wants µA. */
  scale?: number;
}

export function FormNumberField<V extends FieldValues, T>({
  name,
  control,
  scale = 1,
  ...rest
}: Tied<NumberFieldProps, V, T> & FormNumberExtra) {
  const { held, change, onBlur, ref, error } = useTied({ name, control });
  return (
    <NumberField
      {...rest}
      value={typeof held === 'number' ? held / scale : null}
      // A whole unit stays whole: 2.01 mA is 2010 µA and not 2009.9999999999998.
      onChange={(value) => change(value === null ? null : scale === 1 ? value : Math.round(value * scale))}
      onBlur={onBlur}
      inputRef={ref}
      error={error}
    />
  );
}

export function FormSelectField<O extends string, V extends FieldValues, T>({
  name,
  control,
  emptyAs,
  ...rest
}: Tied<SelectFieldProps<O>, V, T> & MayBeEmpty) {
  const { held, change, onBlur, ref, error } = useTied({ name, control });
  const value = rest.options.find((option) => option.value === held)?.value ?? '';
  return (
    <SelectField
      {...rest}
      value={value}
      onChange={(chosen) => change(emptied(chosen, emptyAs))}
      onBlur={onBlur}
      inputRef={ref}
      error={error}
    />
  );
}

export function FormDateField<V extends FieldValues, T>({
  name,
  control,
  emptyAs,
  ...rest
}: Tied<DateFieldProps, V, T> & MayBeEmpty) {
  const { held, change, onBlur, ref, error } = useTied({ name, control });
  return (
    <DateField
      {...rest}
      value={asText(held)}
      onChange={(picked) => change(emptied(picked, emptyAs))}
      onBlur={onBlur}
      inputRef={ref}
      error={error}
    />
  );
}

export function FormTimeField<V extends FieldValues, T>({
  name,
  control,
  emptyAs,
  ...rest
}: Tied<TimeFieldProps, V, T> & MayBeEmpty) {
  const { held, change, onBlur, ref, error } = useTied({ name, control });
  return (
    <TimeField
      {...rest}
      value={asText(held)}
      onChange={(picked) => change(emptied(picked, emptyAs))}
      onBlur={onBlur}
      inputRef={ref}
      error={error}
    />
  );
}

export function FormCheckboxField<V extends FieldValues, T>({
  name,
  control,
  ...rest
}: Tied<CheckboxFieldProps, V, T>) {
  const { held, change, onBlur, ref, error } = useTied({ name, control });
  return (
    <CheckboxField {...rest} value={held === true} onChange={change} onBlur={onBlur} inputRef={ref} error={error} />
  );
}

export function FormChoice<O extends string, V extends FieldValues, T>({
  name,
  control,
  ...rest
}: Tied<ChoiceProps<O>, V, T>) {
  const { held, change, error } = useTied({ name, control });
  const value = rest.options.find((option) => option.value === held)?.value ?? null;
  return <Choice {...rest} value={value} onChange={change} error={error} />;
}
