/**
 * What the form means while it is written: the trapezoid to scale with the old one dashed, every limit as a bar with layer and source, the
 * verdict of the same rule that the server uses.
 */
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

const tones = { accept: 'action', second_signature: 'caution', refuse: 'stop' } as const;
const minute = 60;

export function MeaningColumn({ value, before, ageYears, limits }: MeaningColumnProps) {
  const { t } = useTranslation('prescription');
  const { rem } = useTheme();
  const format = useFormat();
  const { dose, schedule } = value;
  const judged = judgeDose(doseFactsOf({ ...dose, sessionsPerDay: schedule.maxPerDay, minGapHours: schedule.minGapHours }), ageYears, limits);
  const bars = judged.rows.filter((row) => row.value !== undefined && row.ceiling !== undefined);
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
                <Text>{t(`row.${row.quantity}`)}</Text>
                <Text size="fine" tone="muted">
                  {t('sourceOnly', { source: row.source })}
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

function Bar({ row }: { row: DoseRow }) {
  const { t } = useTranslation('prescription');
  const format = useFormat();
  const withUnit = (amount: number) => `${format.number(amount)} ${row.unit}`;
  const binding = row.siteLimit ?? row.routineLimit ?? row.ceiling ?? 0;
  return (
    <LimitBar
      label={t(`row.${row.quantity}`)}
      value={row.value ?? 0}
      unit={row.unit}
      ceiling={row.ceiling ?? 0}
      {...(row.siteLimit === undefined ? {} : { siteLimit: row.siteLimit })}
      {...(row.routineLimit === undefined ? {} : { routine: row.routineLimit })}
      layerText={t(row.siteLimit === undefined ? 'layer.routine' : 'layer.site', { limit: withUnit(binding) })}
      sourceText={t('source', { ceiling: withUnit(row.ceiling ?? 0), source: row.source })}
      tone={tones[row.tier]}
    />
  );
}
