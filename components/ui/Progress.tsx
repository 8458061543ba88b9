/**
 * How far along: a bar, and "3 of 9" in words. It must not be used for a session, whose progress is the trapezoid.
 */
import { View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Text } from '@/components/ui/Text';
import { radius, space, useTheme } from '@/components/ui/theme';

export interface ProgressProps {
  value: number;
  max: number;
  /** What is counted: "Questions", "Rows written". */
  label: string;
  /** The words are shown elsewhere on the page; the bar alone is drawn. */
  hideText?: boolean;
  /** In place of "3 of 9". */
  text?: string;
}

export function Progress({ value, max, label, hideText, text }: ProgressProps) {
  const { t } = useTranslation('common');
  const { colour } = useTheme();
  const words = text ?? t('progress.of', { value, max });
  const share = max > 0 ? Math.min(1, Math.max(0, value / max)) : 0;
  return (
    <View style={{ gap: space[1] }}>
      {hideText ? null : (
        <View style={{ flexDirection: 'row', justifyContent: 'space-between', gap: space[3] }} aria-hidden>
          <Text size="small" tone="muted">
            {label}
          </Text>
          <Text size="small" tone="muted" digits>
            {words}
          </Text>
        </View>
      )}
      <View
        role="progressbar"
        aria-label={label}
        aria-valuemin={0}
        aria-valuemax={max}
        aria-valuenow={value}
        aria-valuetext={words}
        style={{
          height: space[1] + space.half,
          borderRadius: radius / 2,
          backgroundColor: colour.line,
          overflow: 'hidden',
        }}
      >
        <View style={{ height: '100%', width: `${share * 100}%`, backgroundColor: colour.action }} />
      </View>
    </View>
  );
}
