/**
 * The next session at a glance: which, how strong, how long, until when, and how the last one went; with the strip.
 */
import { View } from 'react-native';
import type { TFunction } from 'i18next';
import { useTranslation } from 'react-i18next';
import { Strip } from '@/components/features/course/pictures/Strip';
import { useFormat, type Format } from '@/components/runtime/format';
import { Card } from '@/components/ui/Card';
import { Definition, type DefinitionRow } from '@/components/ui/Definition';
import { space } from '@/components/ui/theme';
import type { ClearanceView } from '@/shared/contracts/clearance';
import type { CourseView } from '@/shared/contracts/course';
import { whenOf } from './pictures/RefusalList';

type Planned = NonNullable<ClearanceView['nextSession']>;

/** A window that is open is no promise: "can start" stands only where nothing but the check is missing. */
function windowRow({ asOf, ...clearance }: ClearanceView, { windowFrom, windowTo }: Planned, format: Format, t: TFunction): DefinitionRow {
  if (windowFrom > asOf) return { label: t('clearance:today.from'), value: whenOf(windowFrom, asOf, format, t) };
  const mayStart = clearance.allowed || clearance.readyForPrecheck || clearance.livePermitId !== null;
  if (mayStart) return { label: t('clearance:today.startUntil'), value: whenOf(windowTo, asOf, format, t) };
  return { label: t('clearance:today.planned'), value: t('clearance:today.plannedValue', { from: whenOf(windowFrom, asOf, format, t), until: format.time(windowTo) }) };
}

export function NextSessionCard({ clearance, course }: { clearance: ClearanceView; course: CourseView }) {
  const { t } = useTranslation('clearance');
  const format = useFormat(clearance.zone);
  const { nextSession: next, dose } = clearance;
  const last = course.marks.findLast((mark) => mark.startedAt !== null && mark.deliveredMinutes !== null);
  const rows: DefinitionRow[] = [];
  if (dose) rows.push({ label: t('today.strength'), value: t('today.strengthValue', { intensity: format.number(dose.intensityMilliamp), minutes: format.number(dose.holdSeconds / 60, 1) }) });
  if (next) rows.push(windowRow(clearance, next, format, t));
  if (last?.startedAt) {
    rows.push({
      label: t('today.lastSession'),
      value: t('today.lastValue', { day: format.day(last.startedAt), minutes: format.number(last.deliveredMinutes ?? 0, 0), planned: format.number(last.plannedMinutes, 0) }),
    });
  }
  return (
    <Card
      heading={next ? t('today.session', { number: next.number, total: next.of }) : t('course:screen.title')}
      {...(dose ? { aside: t('today.inAll', { minutes: format.number(dose.minutes, 0) }) } : {})}
    >
      <View style={{ gap: space[4] }}>
        {course.marks.length > 0 ? <Strip marks={course.marks} size="card" zone={clearance.zone} /> : null}
        {rows.length > 0 ? <Definition rows={rows} layout="rows" /> : null}
      </View>
    </Card>
  );
}
