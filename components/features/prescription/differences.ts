// What differs between two versions of a prescription, as label, old and new. It compares what people read, field by field.

import type { TFunction } from 'i18next';
import type { Format } from '@/components/runtime/format';
import type { PrescriptionView } from '@/shared/contracts/prescription';
import { chargeOf } from '@/shared/rules/dose';
import type { PrescriptionInput } from './PrescriptionEditor';

type Content = Pick<PrescriptionInput, 'dose' | 'schedule' | 'assisted'>;

export interface Difference {
  label: string;
  old: string;
  new: string;
}

const minute = 60;

/** Every field with its words, in the order of the form. */
export function linesOf({ dose, schedule, assisted }: Content, format: Format, t: TFunction): { label: string; value: string }[] {
  const withUnit = (value: number, unit: string) => `${format.number(value)} ${t(`prescription:unit.${unit}`)}`;
  const pad = (polarity: 'anode' | 'cathode') => {
    const electrode = dose.electrodes.find((one) => one.polarity === polarity);
    return electrode ? `${electrode.position}, ${withUnit(electrode.areaSquareCentimetre, 'area')}` : '';
  };
  return [
    { label: t('prescription:intensity'), value: withUnit(dose.intensityMilliamp, 'milliamp') },
    { label: t('prescription:hold'), value: withUnit(dose.holdSeconds / minute, 'minutes') },
    { label: t('prescription:rampUp'), value: withUnit(dose.rampUpSeconds, 'seconds') },
    { label: t('prescription:rampDown'), value: withUnit(dose.rampDownSeconds, 'seconds') },
    { label: t('prescription:chargeEach'), value: t('prescription:charge', { charge: format.number(chargeOf(dose)) }) },
    { label: t('prescription:anode'), value: pad('anode') },
    { label: t('prescription:cathode'), value: pad('cathode') },
    { label: t('prescription:days'), value: schedule.days.map((day) => t(`prescription:weekday.${day}`)).join(' ') },
    { label: t('prescription:from'), value: schedule.hoursFrom },
    { label: t('prescription:to'), value: schedule.hoursTo },
    { label: t('prescription:startsOn'), value: format.date(schedule.startsOn) },
    { label: t('prescription:expiresOn'), value: format.date(schedule.expiresOn) },
    { label: t('prescription:sessions'), value: format.number(schedule.sessionsTotal) },
    { label: t('prescription:minGap'), value: withUnit(schedule.minGapHours, 'hours') },
    { label: t('prescription:perDay'), value: format.number(schedule.maxPerDay) },
    { label: t('prescription:perWeek'), value: format.number(schedule.maxPer7Days) },
    { label: t('prescription:makeUp'), value: t(schedule.makeUpMissed ? 'sessions:yes' : 'sessions:no') },
    { label: t('prescription:assisted'), value: t(assisted ? 'sessions:yes' : 'sessions:no') },
  ];
}

/** Only the lines that differ. */
export function differencesOf(before: PrescriptionView, after: Content, format: Format, t: TFunction): Difference[] {
  const old = linesOf(before, format, t);
  return linesOf(after, format, t).flatMap((line, index) => {
    const was = old[index]?.value ?? '';
    return was === line.value ? [] : [{ label: line.label, old: was, new: line.value }];
  });
}
