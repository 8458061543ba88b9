/**
 * Set-up, second: where each pad sits, seen from above and in the mirror, and the steps as check items. It must not go on before each is
 * ticked: a pad in the wrong place is another treatment.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { HeadMap } from '@/components/features/session/pictures/HeadMap';
import { usePlaceName } from '@/components/features/session/pictures/place-words';
import { placeFromFront } from '@/components/features/session/pictures/positions';
import { StepShell } from '@/components/layout/StepShell';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { CheckboxField } from '@/components/ui/Field';
import { Text } from '@/components/ui/Text';
import type { ClearanceView } from '@/shared/contracts/clearance';
import type { SetUp } from './use-set-up';

export function PlacementStep({ setUp, clearance }: { setUp: SetUp; clearance: ClearanceView }) {
  const { t } = useTranslation('device');
  const placeName = usePlaceName();
  const [view, setView] = useState<'above' | 'front'>('above');
  const electrodes = clearance.dose?.electrodes ?? [];
  const items = [
    { id: 'skin', label: t('placing.step.skin') },
    { id: 'wet', label: t('placing.step.wet') },
    ...electrodes.map(({ position, polarity }) => ({
      id: position,
      label: t(`placing.step.${polarity}`, { place: placeName(position) }),
    })),
    { id: 'strap', label: t('placing.step.strap') },
  ];
  const isWhole = electrodes.length > 0 && items.every(({ id }) => setUp.placed.includes(id));
  const tick = (id: string, isDone: boolean) =>
    setUp.setPlaced(isDone ? [...setUp.placed, id] : setUp.placed.filter((one) => one !== id));
  const label = electrodes
    .map(({ position, polarity }) => t(`placing.${polarity}`, { place: placeName(position) }))
    .join(' ');
  const canBeMirrored = electrodes.every(({ position }) => placeFromFront(position) !== undefined);
  return (
    <StepShell
      title={t('placing.title')}
      step={{ value: 2, max: 3, label: t('step', { value: 2, max: 3 }) }}
      onBack={setUp.back}
      footer={
        <Button
          label={t('placing.next')}
          size="large"
          grow
          disabled={!isWhole}
          reason={isWhole ? undefined : t('placing.waiting')}
          onPress={setUp.toContact}
        />
      }
    >
      <HeadMap
        view={view}
        placements={electrodes}
        label={label}
        leftLabel={t('placing.left')}
        rightLabel={t('placing.right')}
        caption={t(`placing.caption.${view}`)}
      />
      {canBeMirrored ? (
        <Button
          kind="quiet"
          grow
          label={t(view === 'above' ? 'placing.showFront' : 'placing.showAbove')}
          onPress={() => setView(view === 'above' ? 'front' : 'above')}
        />
      ) : null}
      <Card heading={t('placing.steps')}>
        {items.map(({ id, label: text }, index) => (
          <CheckboxField
            key={id}
            label={t('placing.numbered', { number: index + 1, text })}
            value={setUp.placed.includes(id)}
            onChange={(isDone) => tick(id, isDone)}
          />
        ))}
      </Card>
      <Text size="small" tone="muted">
        {t('placing.never')}
      </Text>
    </StepShell>
  );
}
