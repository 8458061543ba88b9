/**
 * "Something feels wrong": what, then how strong, two touches, on the run's own page. Serious things stop at once with one touch. It must
 * never cover Stop.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { ScaleInput } from '@/components/ui/ScaleInput';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import { effectKinds, redFlags, type EffectKind, type RedFlag } from '@/shared/values/codes';

/** Asked with alternating current only. */
const alternatingOnly: readonly EffectKind[] = ['phosphenes', 'dizziness'];
const kinds = effectKinds.filter((kind) => !alternatingOnly.includes(kind));

export interface FeelPanelProps {
  onFeel(kind: EffectKind, strength: number): void;
  onRaise(flag: RedFlag): void;
  onClose(): void;
}

export function FeelPanel({ onFeel, onRaise, onClose }: FeelPanelProps) {
  const { t } = useTranslation('session');
  const [kind, setKind] = useState<EffectKind | null>(null);
  if (kind !== null) {
    return (
      <Card heading={t(`diary:effect.${kind}`)}>
        <ScaleInput
          label={t('feel.howStrong')}
          lowLabel={t('feel.low')}
          highLabel={t('feel.high')}
          min={1}
          value={null}
          onChange={(strength) => onFeel(kind, strength)}
        />
        <Button kind="quiet" label={t('feel.other')} onPress={() => setKind(null)} />
      </Card>
    );
  }
  return (
    <Card
      heading={t('feel.what')}
      aside={<Button kind="quiet" size="small" label={t('feel.close')} onPress={onClose} />}
    >
      <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[2] }}>
        {kinds.map((one) => (
          <Button key={one} kind="plain" label={t(`diary:effect.${one}`)} onPress={() => setKind(one)} />
        ))}
      </View>
      <View style={{ gap: space[2] }}>
        <Text weight="bold">{t('feel.serious')}</Text>
        <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[2] }}>
          {redFlags.map((flag) => (
            <Button key={flag} kind="danger" label={t(`diary:redFlag.${flag}`)} onPress={() => onRaise(flag)} />
          ))}
        </View>
      </View>
    </Card>
  );
}
