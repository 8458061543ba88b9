/**
 * Grading an effect: how strong, what came of it, whether the stimulation caused it, whether it was to be expected. Unsure is "possible".
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import type { z } from 'zod';
import { CheckboxField, SelectField } from '@/components/ui/Field';
import { space } from '@/components/ui/theme';
import { Grading } from '@/shared/contracts/worklist';

export type GradingValue = z.infer<typeof Grading>;

export function GradingFields({ value, onChange }: { value: GradingValue; onChange(value: GradingValue): void }) {
  const { t } = useTranslation('review');
  return (
    <View style={{ gap: space[4] }}>
      <SelectField
        label={t('grading.severity')}
        value={value.severity}
        onChange={(severity) => severity && onChange({ ...value, severity })}
        options={Grading.shape.severity.options.map((option) => ({ value: option, label: t(`grading.severities.${option}`) }))}
      />
      <SelectField
        label={t('grading.causality')}
        value={value.causality}
        onChange={(causality) => causality && onChange({ ...value, causality })}
        options={Grading.shape.causality.options.map((option) => ({ value: option, label: t(`grading.causalities.${option}`) }))}
      />
      <CheckboxField label={t('grading.serious')} hint={t('grading.seriousHint')} value={value.serious} onChange={(serious) => onChange({ ...value, serious })} />
      <CheckboxField label={t('grading.expected')} value={value.expected} onChange={(expected) => onChange({ ...value, expected })} />
    </View>
  );
}
