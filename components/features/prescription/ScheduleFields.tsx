/**
 * The schedule: days, hours, counts, gap, dates, alone or assisted.
 */
import { useController, type Control } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { FormCheckboxField, FormDateField, FormNumberField, FormTimeField } from '@/components/forms/fields';
import { Card } from '@/components/ui/Card';
import { Chips } from '@/components/ui/Choice';
import { space, useTheme } from '@/components/ui/theme';
import type { PrescriptionInput } from './PrescriptionEditor';

const weekdays = ['1', '2', '3', '4', '5', '6', '7'] as const;
type WeekdayText = (typeof weekdays)[number];
const cellRem = 11;

export function ScheduleFields<Output>({ control }: { control: Control<PrescriptionInput, unknown, Output> }) {
  const { t } = useTranslation('prescription');
  const { rem } = useTheme();
  const { field, fieldState } = useController<PrescriptionInput, 'schedule.days', Output>({ name: 'schedule.days', control });
  const cell = { flexGrow: 1, flexShrink: 1, flexBasis: rem(cellRem) } as const;
  const row = { flexDirection: 'row', flexWrap: 'wrap', gap: space[4] } as const;
  return (
    <Card heading={t('schedule')}>
      <View style={{ gap: space[4] }}>
        <Chips<WeekdayText>
          label={t('days')}
          values={weekdays.filter((day) => field.value.includes(Number(day)))}
          onChange={(days) => field.onChange(days.map(Number).toSorted((a, b) => a - b))}
          options={weekdays.map((value) => ({ value, label: t(`weekday.${value}`) }))}
          {...(fieldState.error?.message ? { error: fieldState.error.message } : {})}
        />
        <View style={row}>
          <View style={cell}>
            <FormTimeField name="schedule.hoursFrom" control={control} label={t('from')} />
          </View>
          <View style={cell}>
            <FormTimeField name="schedule.hoursTo" control={control} label={t('to')} />
          </View>
          <View style={cell}>
            <FormDateField name="schedule.startsOn" control={control} label={t('startsOn')} />
          </View>
          <View style={cell}>
            <FormDateField name="schedule.expiresOn" control={control} label={t('expiresOn')} />
          </View>
        </View>
        <View style={row}>
          <View style={cell}>
            <FormNumberField name="schedule.sessionsTotal" control={control} label={t('sessions')} />
          </View>
          <View style={cell}>
            <FormNumberField name="schedule.minGapHours" control={control} label={t('minGap')} unit={t('unit.hours')} />
          </View>
          <View style={cell}>
            <FormNumberField name="schedule.maxPerDay" control={control} label={t('perDay')} />
          </View>
          <View style={cell}>
            <FormNumberField name="schedule.maxPer7Days" control={control} label={t('perWeek')} />
          </View>
        </View>
        <FormCheckboxField name="schedule.makeUpMissed" control={control} label={t('makeUp')} />
        <FormCheckboxField name="assisted" control={control} label={t('assisted')} />
      </View>
    </Card>
  );
}
