/**
 * The product's mark: one session, filled. It must not stand for anything but the product; sessions are drawn by their
 * own pictures.
 */
import Svg, { Path } from 'react-native-svg';
import { useTheme } from '@/components/ui/theme';

/** On a field of 32 × 18: ramp up, hold, ramp down. The same points are in assets/mark.svg. */
const outline = 'M0 18 L6 0 H26 L32 18 Z';

export function Mark({ width = 32 }: { width?: number }) {
  const { colour } = useTheme();
  return (
    <Svg width={width} height={(width * 18) / 32} viewBox="0 0 32 18" aria-hidden>
      <Path d={outline} fill={colour.action} />
    </Svg>
  );
}
