/**
 * The dose: positions, intensity, ramps, hold. Every number has its unit.
 */
import type { Control } from 'react-hook-form';
import { useController } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { FormNumberField, FormSelectField } from '@/components/forms/fields';
import { Card } from '@/components/ui/Card';
import { NumberField } from '@/components/ui/Field';
import { space, useTheme } from '@/components/ui/theme';
import { positions } from '@/shared/values/positions';
import type { PrescriptionInput } from './PrescriptionEditor';

const cellRem = 11;
const minute = 60;

export function DoseFields<Output>({ control }: { control: Control<PrescriptionInput, unknown, Output> }) {
  const { t } = useTranslation('prescription');
  const { rem } = useTheme();
  const cell = { flexGrow: 1, flexShrink: 1, flexBasis: rem(cellRem) } as const;
  const row = { flexDirection: 'row', flexWrap: 'wrap', gap: space[4] } as const;
  const options = positions.map((name) => ({ value: name, label: name }));
  return (
    <Card heading={t('dose')}>
      <View style={{ gap: space[4] }}>
        <View style={row}>
          <View style={cell}>
            <FormSelectField name="dose.electrodes.0.position" control={control} label={t('anode')} options={options} />
          </View>
          <View style={cell}>
            <FormNumberField name="dose.electrodes.0.areaSquareCentimetre" control={control} label={t('anodeArea')} unit={t('unit.area')} />
          </View>
          <View style={cell}>
            <FormSelectField name="dose.electrodes.1.position" control={control} label={t('cathode')} options={options} />
          </View>
          <View style={cell}>
            <FormNumberField name="dose.electrodes.1.areaSquareCentimetre" control={control} label={t('cathodeArea')} unit={t('unit.area')} />
          </View>
        </View>
        <View style={row}>
          <View style={cell}>
            <FormNumberField name="dose.intensityMilliamp" control={control} label={t('intensity')} unit={t('unit.milliamp')} />
          </View>
          <View style={cell}>
            <HoldField control={control} />
          </View>
          <View style={cell}>
            <FormNumberField name="dose.rampUpSeconds" control={control} label={t('rampUp')} unit={t('unit.seconds')} />
          </View>
          <View style={cell}>
            <FormNumberField name="dose.rampDownSeconds" control={control} label={t('rampDown')} unit={t('unit.seconds')} />
          </View>
        </View>
      </View>
    </Card>
  );
}

/** Written in minutes, kept in seconds. */
function HoldField<Output>({ control }: { control: Control<PrescriptionInput, unknown, Output> }) {
  const { t } = useTranslation('prescription');
  const { field, fieldState } = useController<PrescriptionInput, 'dose.holdSeconds', Output>({ name: 'dose.holdSeconds', control });
  return (
    <NumberField
      label={t('hold')}
      unit={t('unit.minutes')}
      value={typeof field.value === 'number' ? field.value / minute : null}
      onChange={(minutes) => field.onChange(minutes === null ? null : Math.round(minutes * minute))}
      onBlur={field.onBlur}
      {...(fieldState.error?.message ? { error: fieldState.error.message } : {})}
    />
  );
}
