/**
 * The course strip from the marks that a contract carries: adds each mark's own sentence and the course's. It fetches
 * nothing and judges nothing.
 */
import { useMemo } from 'react';
import { useTranslation } from 'react-i18next';
import { CourseStrip, type CourseMark as DrawnMark } from '@/components/features/course/pictures/CourseStrip';
import type { StripSize } from '@/components/features/course/pictures/strip-geometry';
import { formatIn, type Format } from '@/components/runtime/format';
import type { CourseMark } from '@/shared/contracts/course';
import { addDays, localMoment } from '@/shared/values/zone';

export interface StripProps {
  marks: readonly CourseMark[];
  size: StripSize;
  /** The participant's zone: weeks and days are theirs. */
  zone: string;
  onPressMark?(mark: CourseMark): void;
}

type Translate = ReturnType<typeof useTranslation>['t'];

/** The Monday of a local day. */
function mondayOf(instant: string, zone: string): string {
  const { date, weekday } = localMoment(Date.parse(instant), zone);
  return addDays(date, 1 - weekday);
}

function labelOf(mark: CourseMark, format: Format, t: Translate): string {
  const parts = [
    t('mark.session', { number: mark.number, day: format.day(mark.startedAt ?? mark.windowFrom) }),
    t(`mark.state.${mark.state}`, {
      minutes: format.number(mark.deliveredMinutes ?? 0, 0),
      planned: format.number(mark.plannedMinutes, 0),
    }),
  ];
  if (mark.headache !== null && mark.headache > 0) parts.push(t('mark.headache', { strength: mark.headache }));
  return parts.join(', ');
}

export function Strip({ marks, size, zone, onPressMark }: StripProps) {
  const { t, i18n } = useTranslation('course');
  const drawn = useMemo(() => {
    const format = formatIn(i18n.language, zone);
    return marks.map((mark, index): DrawnMark => {
      const before = marks[index - 1];
      return {
        number: mark.number,
        state: mark.state,
        label: labelOf(mark, format, t),
        weekStart: before !== undefined && mondayOf(before.windowFrom, zone) !== mondayOf(mark.windowFrom, zone),
        ...(mark.fraction === null ? {} : { fraction: mark.fraction }),
      };
    });
  }, [marks, zone, i18n.language, t]);
  const behind = marks.filter(
    (mark) => mark.state === 'delivered' || mark.state === 'partial' || mark.state === 'missed',
  ).length;
  const delivered = marks.filter((mark) => mark.state === 'delivered').length;
  return (
    <CourseStrip
      marks={drawn}
      size={size}
      label={t('mark.course', { behind, total: marks.length, delivered })}
      {...(onPressMark
        ? {
            onPressMark: (pressed: DrawnMark) => {
              const mark = marks[drawn.indexOf(pressed)];
              if (mark) onPressMark(mark);
            },
          }
        : {})}
    />
  );
}
