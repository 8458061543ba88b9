// The rows in which a protocol is read: limits with their ceilings, and terms. Order is the order of reading.

import type { TFunction } from 'i18next';
import type { Format } from '@/components/runtime/format';
import type { DefinitionRow } from '@/components/ui/Definition';
import { ceilings, type Ceiling } from '@/shared/rules/ceilings';
import type { ProtocolSettings, SiteLimits } from '@/shared/values/protocol-settings';

type NumberLimit = Exclude<keyof SiteLimits, 'allowsRings'>;

/** Each limit with the ceiling that bounds it, if one does. */
export const limitFields: readonly { field: NumberLimit; ceiling: Ceiling | null; unit: string }[] = [
  { field: 'routineCurrentMilliamp', ceiling: ceilings.currentMilliamp, unit: 'mA' },
  { field: 'mostCurrentMilliamp', ceiling: ceilings.currentMilliamp, unit: 'mA' },
  { field: 'routineMinutes', ceiling: ceilings.minutes, unit: 'min' },
  { field: 'mostMinutes', ceiling: ceilings.minutes, unit: 'min' },
  { field: 'routineChargeCoulomb', ceiling: ceilings.chargeCoulomb, unit: 'C' },
  { field: 'mostChargeCoulomb', ceiling: ceilings.chargeCoulomb, unit: 'C' },
  { field: 'routineDensityMilliampPerSquareCentimetre', ceiling: ceilings.densityMilliampPerSquareCentimetre, unit: 'mA/cm²' },
  { field: 'mostDensityMilliampPerSquareCentimetre', ceiling: ceilings.densityMilliampPerSquareCentimetre, unit: 'mA/cm²' },
  { field: 'routineAreaSquareCentimetre', ceiling: null, unit: 'cm²' },
  { field: 'routineSessionsPerDay', ceiling: null, unit: '' },
  { field: 'mostMinutesPerDay', ceiling: ceilings.minutesPerDay, unit: 'min' },
  { field: 'routineGapHours', ceiling: null, unit: 'h' },
  { field: 'leastGapHours', ceiling: ceilings.leastGapHours, unit: 'h' },
  { field: 'routineCharge24hCoulomb', ceiling: ceilings.charge24hCoulomb, unit: 'C' },
  { field: 'mostCharge24hCoulomb', ceiling: ceilings.charge24hCoulomb, unit: 'C' },
  { field: 'routineCharge7dCoulomb', ceiling: ceilings.charge7dCoulomb, unit: 'C' },
  { field: 'mostCharge7dCoulomb', ceiling: ceilings.charge7dCoulomb, unit: 'C' },
  { field: 'minorCurrentMilliamp', ceiling: ceilings.minorCurrentMilliamp, unit: 'mA' },
];

/** "Ceiling 4 mA (Bikson et al. 2016)" */
export function ceilingText(ceiling: Ceiling, format: Format, t: TFunction): string {
  return t('protocol:ceiling', { value: format.number(ceiling.value), unit: ceiling.unit, source: ceiling.source });
}

export function limitRowsOf(limits: SiteLimits, format: Format, t: TFunction): DefinitionRow[] {
  return limitFields.map(({ field, ceiling, unit }) => {
    const value = limits[field];
    return {
      label: t(`protocol:limit.${field}`),
      value: value === null ? t('protocol:notAllowed') : `${format.number(value)} ${unit}`.trim(),
      ...(ceiling ? { hint: ceilingText(ceiling, format, t) } : {}),
    };
  });
}

export function termRowsOf(settings: ProtocolSettings, format: Format, t: TFunction): DefinitionRow[] {
  const days = (count: number) => t('protocol:days', { count });
  return [
    { label: t('protocol:term.consentVersion'), value: t('protocol:consentValue', { version: settings.consentVersion, from: format.day(settings.consentRequiredFrom) }) },
    { label: t('protocol:term.screeningValidDays'), value: days(settings.screeningValidDays) },
    { label: t('protocol:term.trainingValidDays'), value: days(settings.trainingValidDays) },
    { label: t('protocol:term.watchedSessionsRequired'), value: format.number(settings.watchedSessionsRequired) },
    { label: t('protocol:term.excludesPregnancy'), value: t(settings.excludesPregnancy ? 'protocol:yes' : 'protocol:no') },
    { label: t('protocol:term.moodCheckEveryDays'), value: settings.moodCheckEveryDays === null ? t('protocol:notAsked') : days(settings.moodCheckEveryDays) },
    { label: t('protocol:term.retentionYears'), value: t('protocol:years', { count: settings.retentionYears }) },
  ];
}
