/**
 * One limit as a bar: how much of the ceiling a dose uses, a tick where the site's own limit lies, which layer and which
 * source. It must not decide whether a value is allowed: the tone is given.
 */
import { View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Icon } from '@/components/ui/Icon';
import { Text } from '@/components/ui/Text';
import { space, stroke, useTheme, type StateTone } from '@/components/ui/theme';

export interface LimitBarProps {
  label: string;
  value: number;
  unit: string;
  siteLimit?: number;
  /** The end of the bar. */
  ceiling: number;
  /** Up to where it is the usual; a short tick above the bar. */
  routine?: number;
  /** Which layer binds here: "Site limit 4.0 C". */
  layerText: string;
  /** Where the ceiling comes from: "ceiling 7.2 C, Bikson et al. 2016". */
  sourceText: string;
  /** `action` = inside, `caution` = above the routine, `stop` = refused. */
  tone?: Extract<StateTone, 'action' | 'steady' | 'caution' | 'stop'>;
  /** The value before an amendment, as a short tick below the bar. */
  before?: number;
}

export function LimitBar(props: LimitBarProps) {
  const { label, value, unit, siteLimit, ceiling, routine, layerText, sourceText, tone = 'action', before } = props;
  const { t, i18n } = useTranslation('common');
  const { colour, rem } = useTheme();
  const format = new Intl.NumberFormat(i18n.language, { maximumSignificantDigits: 3 });
  const withUnit = (amount: number) => `${format.format(amount)} ${unit}`;
  const share = (amount: number) => (ceiling > 0 ? Math.min(1, Math.max(0, amount / ceiling)) : 0);
  const percent = (amount: number) => `${share(amount) * 100}%` as const;
  const height = rem(0.875);
  const sentence =
    siteLimit === undefined
      ? t('limit.sentence', { label, value: withUnit(value), ceiling: withUnit(ceiling) })
      : t('limit.sentenceWithSite', {
          label,
          value: withUnit(value),
          siteLimit: withUnit(siteLimit),
          ceiling: withUnit(ceiling),
        });
  return (
    <View style={{ gap: space[1] }}>
      <View
        style={{
          flexDirection: 'row',
          flexWrap: 'wrap',
          alignItems: 'baseline',
          justifyContent: 'space-between',
          columnGap: space[3],
        }}
      >
        <View style={{ flexDirection: 'row', alignItems: 'center', gap: space[2] }}>
          {tone === 'stop' || tone === 'caution' ? <Icon name={tone} tone={tone} size={rem(0.875)} /> : null}
          <Text size="small" weight="bold">
            {label}
          </Text>
        </View>
        <Text size="small" tone="muted" digits>
          <Text weight="bold" tone={tone === 'action' || tone === 'steady' ? 'ink' : tone}>
            {withUnit(value)}
          </Text>
          {` ${t('limit.ofCeiling', { ceiling: withUnit(ceiling) })}`}
        </Text>
      </View>
      <View
        role="img"
        aria-label={sentence}
        dir="ltr"
        style={{ height: height + space[1] * 2, justifyContent: 'center' }}
      >
        <View style={{ height, backgroundColor: colour.sunken, borderWidth: stroke.hair, borderColor: colour.line }}>
          <View style={{ height: '100%', width: percent(value), backgroundColor: colour[tone] }} />
        </View>
        {routine === undefined ? null : <Tick at={percent(routine)} top={space[0]} height={space[1]} />}
        {before === undefined ? null : <Tick at={percent(before)} top={height + space[1]} height={space[1]} />}
        {siteLimit === undefined ? null : (
          <View
            style={{
              position: 'absolute',
              start: percent(siteLimit),
              marginStart: -stroke.firm,
              top: space[0],
              bottom: space[0],
              width: stroke.bold - stroke.hair,
              backgroundColor: colour.ink,
            }}
          />
        )}
      </View>
      <Text size="fine" tone="muted" digits>
        {`${layerText} · ${sourceText}`}
      </Text>
    </View>
  );
}

/** A short mark outside the bar: above it where the usual ends, below it where the value stood before. */
function Tick({ at, top, height }: { at: `${number}%`; top: number; height: number }) {
  const { colour } = useTheme();
  return (
    <View style={{ position: 'absolute', start: at, top, height, width: stroke.firm, backgroundColor: colour.muted }} />
  );
}
