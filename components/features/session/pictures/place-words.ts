/**
 * A 10-10 position as its wearer would say it: which side, which part of the head. It gives keys; the words are in `device:place`.
 */
import { useTranslation } from 'react-i18next';

const rows = ['Fp', 'AF', 'FT', 'FC', 'TP', 'CP', 'PO', 'F', 'T', 'C', 'P', 'O'] as const;
type Row = (typeof rows)[number];
type Side = 'left' | 'middle' | 'right';

/** Odd numbers are on the left, even ones on the right, z is the midline (10-10 system). */
export function placeOf(position: string): { row: Row; side: Side } | null {
  const row = rows.find((name) => position.startsWith(name));
  if (row === undefined) return null;
  const end = position.slice(row.length);
  if (end === 'z') return { row, side: 'middle' };
  const number = Number(end);
  return Number.isInteger(number) && number > 0 ? { row, side: number % 2 === 1 ? 'left' : 'right' } : null;
}

/** "Left forehead, F3" */
export function usePlaceName(): (position: string) => string {
  const { t } = useTranslation('device');
  return (position) => {
    const place = placeOf(position);
    return place ? t('placeAt', { place: t(`place.${place.row}.${place.side}`), position }) : position;
  };
}
