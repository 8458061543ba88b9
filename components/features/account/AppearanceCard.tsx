/**
 * Light or dark, and the size of the text; kept by this browser.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Card } from '@/components/ui/Card';
import { Choice } from '@/components/ui/Choice';
import { space, useTheme, type Mode } from '@/components/ui/theme';

const modes: readonly Mode[] = ['system', 'light', 'dark'];
/** Own choice of steps; the browser's own zoom works on top of them. */
const scales = { normal: 1, large: 1.25, largest: 1.5 } as const;
type ScaleName = keyof typeof scales;
const scaleNames: readonly ScaleName[] = ['normal', 'large', 'largest'];

export function AppearanceCard() {
  const { t } = useTranslation('common');
  const { mode, setMode, textScale, setTextScale } = useTheme();
  return (
    <Card heading={t('appearance.title')}>
      <View style={{ gap: space[5] }}>
        <Choice label={t('appearance.mode')} value={mode} onChange={setMode} options={modes.map((value) => ({ value, label: t(`appearance.${value}`) }))} />
        <Choice
          label={t('appearance.text')}
          value={scaleNames.find((name) => scales[name] === textScale) ?? null}
          onChange={(name) => setTextScale(scales[name])}
          options={scaleNames.map((value) => ({ value, label: t(`appearance.${value}`) }))}
        />
      </View>
    </Card>
  );
}
