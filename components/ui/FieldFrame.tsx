/**
 * What stands around every field: label above, hint and error below, and the ids that tie them to the control. It must
 * not know what kind of control it holds.
 */
import { useId, type ReactNode } from 'react';
import { View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Icon } from '@/components/ui/Icon';
import { PageLabel, type FieldWiring } from '@/components/ui/page-controls';
import { Text } from '@/components/ui/Text';
import { VisuallyHidden } from '@/components/ui/VisuallyHidden';
import { space, useTheme } from '@/components/ui/theme';

export interface FieldProps {
  label: string;
  /** What to write, and in what form; stands between label and control. */
  hint?: string;
  /** What is wrong and what is allowed; takes the place of nothing, it is added. */
  error?: string;
  /** Marks the few that may stay empty; everything else is needed. */
  optional?: boolean;
  required?: boolean;
  disabled?: boolean;
  /** Label for screen readers only, where the row's own heading names the field to the eye. */
  hideLabel?: boolean;
  testID?: string;
}

export function useFieldWiring({ hint, error }: Pick<FieldProps, 'hint' | 'error'>): FieldWiring {
  const id = useId();
  const parts = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean);
  return { controlId: id, labelId: `${id}-label`, describedBy: parts.length > 0 ? parts.join(' ') : undefined };
}

export function FieldMessages({ wiring, error }: { wiring: FieldWiring; error?: string }) {
  const { rem } = useTheme();
  if (!error) return null;
  return (
    <View style={{ flexDirection: 'row', gap: space[2], alignItems: 'baseline' }}>
      <Icon name="stop" tone="stop" size={rem(0.75)} />
      <Text id={`${wiring.controlId}-error`} size="small" tone="stop" weight="bold" role="alert" grow>
        {error}
      </Text>
    </View>
  );
}

export function FieldFrame({ wiring, children, ...field }: FieldProps & { wiring: FieldWiring; children: ReactNode }) {
  const { t } = useTranslation('common');
  const label = field.optional ? t('field.optional', { label: field.label }) : field.label;
  return (
    <View style={{ gap: space[1], minWidth: 0 }} testID={field.testID}>
      {field.hideLabel ? (
        <VisuallyHidden id={wiring.labelId}>{label}</VisuallyHidden>
      ) : (
        <PageLabel controlId={wiring.controlId}>
          <Text id={wiring.labelId} size="small" weight="bold">
            {label}
          </Text>
        </PageLabel>
      )}
      {field.hint ? (
        <Text id={`${wiring.controlId}-hint`} size="small" tone="muted">
          {field.hint}
        </Text>
      ) : null}
      {children}
      <FieldMessages wiring={wiring} error={field.error} />
    </View>
  );
}
