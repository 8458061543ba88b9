/**
 * What the form means while it is written: the trapezoid to scale with the old one dashed, every limit as a bar with layer and source, the
 * verdict of the same rule that the server uses.
 */
import type { TFunction } from 'i18next';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Trapezoid } from '@/components/features/session/pictures/Trapezoid';
import { useFormat } from '@/components/runtime/format';
import { Card } from '@/components/ui/Card';
import { Notice } from '@/components/ui/Notice';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import { space, useTheme } from '@/components/ui/theme';
import type { PrescriptionView } from '@/shared/contracts/prescription';
import { ceilings, type Ceiling } from '@/shared/rules/ceilings';
import { chargeOf, doseFactsOf, judgeDose, minutesOn, type DoseRow } from '@/shared/rules/dose';
import type { SiteLimits } from '@/shared/values/protocol-settings';
import { LimitBar } from './pictures/LimitBar';
import type { PrescriptionInput } from './PrescriptionEditor';

export interface MeaningColumnProps {
  value: PrescriptionInput;
  before: PrescriptionView | null;
  ageYears: number;
  limits: SiteLimits;
}

/** What is drawn as a bar against its ceiling; everything else is said in words. */
const barCeilings: Partial<Record<DoseRow['quantity'], Ceiling>> = {
  current: ceilings.currentMilliamp,
  minutes: ceilings.minutes,
  charge: ceilings.chargeCoulomb,
  density: ceilings.densityMilliampPerSquareCentimetre,
  day_minutes: ceilings.minutesPerDay,
};
const tones = { accept: 'action', second_signature: 'caution', refuse: 'stop' } as const;
const minute = 60;

export function MeaningColumn({ value, before, ageYears, limits }: MeaningColumnProps) {
  const { t } = useTranslation('prescription');
  const { rem } = useTheme();
  const format = useFormat();
  const { dose, schedule } = value;
  const judged = judgeDose(doseFactsOf({ ...dose, sessionsPerDay: schedule.maxPerDay, minGapHours: schedule.minGapHours }), ageYears, limits);
  const bars = judged.rows.filter((row) => row.value !== undefined && row.ceiling !== undefined && row.quantity in barCeilings);
  const others = judged.rows.filter((row) => !bars.includes(row));
  const isWhole = Number.isFinite(chargeOf(dose));
  return (
    <View style={{ flexGrow: 1, flexShrink: 1, flexBasis: rem(26), minWidth: 0, gap: space[5] }}>
      <Card heading={t('picture')} aside={isWhole ? t('inAll', { minutes: format.number(minutesOn(dose), 1) }) : ''}>
        {isWhole ? (
          <Trapezoid
            size="card"
            intensityMilliamp={dose.intensityMilliamp}
            rampUpSeconds={dose.rampUpSeconds}
            holdSeconds={dose.holdSeconds}
            rampDownSeconds={dose.rampDownSeconds}
            {...(before ? { before: before.dose } : {})}
            label={t('pictureLabel', { intensity: format.number(dose.intensityMilliamp), minutes: format.number(dose.holdSeconds / minute, 1) })}
          />
        ) : null}
      </Card>
      <Notice tone={judged.verdict === 'accept' ? 'steady' : judged.verdict === 'refuse' ? 'stop' : 'caution'} title={t(`verdict.${judged.verdict}`)} />
      <Card heading={t('limits')}>
        <View style={{ gap: space[5] }}>
          {bars.map((row) => (
            <Bar key={row.quantity} row={row} />
          ))}
        </View>
      </Card>
      <Card heading={t('other')}>
        <View style={{ gap: space[2] }}>
          {others.map((row) => (
            <View key={`${row.quantity} ${row.fact ?? ''}`} style={{ flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: space[3] }}>
              <View style={{ flexGrow: 1 }}>
                <Text>
                  {row.value === undefined ? t(`row.${row.quantity}`) : t('rowValue', { label: t(`row.${row.quantity}`), value: `${format.number(row.value)} ${row.unit}`.trim() })}
                </Text>
                <Text size="fine" tone="muted">
                  {limitText(row, format, t)}
                </Text>
              </View>
              <Tag tone={tones[row.tier] === 'action' ? 'steady' : tones[row.tier]} label={t(row.tier === 'accept' ? 'okay' : row.tier === 'refuse' ? 'refused' : 'second')} />
            </View>
          ))}
        </View>
      </Card>
      <Text size="small" tone="muted">
        {t('estimateNote')}
      </Text>
    </View>
  );
}

/** Which limits bind a bar: one signature, the site's own. */
function layerText(row: DoseRow, format: ReturnType<typeof useFormat>, t: TFunction): string {
  const withUnit = (amount: number) => `${format.number(amount)} ${row.unit}`;
  const { routineLimit, siteLimit } = row;
  if (routineLimit === undefined) return t('prescription:layer.site', { site: withUnit(siteLimit ?? row.ceiling ?? 0) });
  if (siteLimit === undefined) return t('prescription:layer.routine', { routine: withUnit(routineLimit) });
  return t('prescription:layer.both', { routine: withUnit(routineLimit), site: withUnit(siteLimit) });
}

/** "from 20 h with one signature, never under 4 h; own choice" */
function limitText(row: DoseRow, format: ReturnType<typeof useFormat>, t: TFunction): string {
  const withUnit = (amount: number) => `${format.number(amount)} ${row.unit}`.trim();
  const parts = [
    ...(row.routineLimit === undefined ? [] : [t(`prescription:one.${row.direction}`, { limit: withUnit(row.routineLimit) })]),
    ...(row.siteLimit === undefined ? [] : [t(`prescription:two.${row.direction}`, { limit: withUnit(row.siteLimit) })]),
    ...(row.floor === undefined || row.ceiling === undefined ? [] : [t('prescription:between', { from: withUnit(row.floor), to: withUnit(row.ceiling) })]),
    row.source,
  ];
  return parts.join(' · ');
}

function Bar({ row }: { row: DoseRow }) {
  const { t } = useTranslation('prescription');
  const format = useFormat();
  const withUnit = (amount: number) => `${format.number(amount)} ${row.unit}`;
  return (
    <LimitBar
      label={t(`row.${row.quantity}`)}
      value={row.value ?? 0}
      unit={row.unit}
      ceiling={row.ceiling ?? 0}
      {...(row.siteLimit === undefined ? {} : { siteLimit: row.siteLimit })}
      {...(row.routineLimit === undefined ? {} : { routine: row.routineLimit })}
      layerText={layerText(row, format, t)}
      sourceText={t('source', { ceiling: withUnit(row.ceiling ?? 0), source: barCeilings[row.quantity]?.source ?? row.source })}
      tone={tones[row.tier]}
    />
  );
}
