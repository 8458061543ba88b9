/**
 * Every reason why a session may not start: what is in the way, whether it passes by itself and when, who can help. It
 * shows what the server said and leaves nothing out.
 */
import { View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { formatIn, type Format } from '@/components/runtime/format';
import { Card } from '@/components/ui/Card';
import { Link } from '@/components/ui/Link';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import { space, type StateTone } from '@/components/ui/theme';
import type { Reason } from '@/shared/contracts/problem';

export interface RefusalListProps {
  reasons: readonly Reason[];
  /** The participant's zone. */
  zone: string;
  /** The server's clock when it answered. */
  now: string;
}

type Translate = ReturnType<typeof useTranslation>['t'];

function toneOf(reason: Reason): { tone: StateTone; word: string } {
  if (reason.code.startsWith('lockout_') || reason.code === 'precheck_hold') return { tone: 'stop', word: 'onHold' };
  if (reason.until) return { tone: 'muted', word: 'passes' };
  return reason.resolvedBy === 'participant' ? { tone: 'action', word: 'you' } : { tone: 'caution', word: 'needs' };
}

/** "today at 16:00", "tomorrow at 07:00", "on Friday 4 December at 07:00" */
export function whenOf(instant: string, now: string, format: Format, t: Translate): string {
  const near = format.nearDay(instant, now);
  if (near === 'today' || near === 'tomorrow') return t(`clearance:until.${near}`, { time: format.time(instant) });
  return t('clearance:until.other', { day: format.day(instant), time: format.time(instant) });
}

/** The server's sentence says when, too; here the next line does, so only what is in the way stands in the first. */
function whatOf(reason: Reason, t: Translate, i18n: { exists(key: string): boolean }): string {
  const key = `clearance:reason.${reason.code}`;
  return reason.until && i18n.exists(key) ? t(key) : reason.sentence;
}

function RefusalCard({ reason, now, format }: { reason: Reason; now: string; format: Format }) {
  const { t, i18n } = useTranslation('clearance');
  const { tone, word } = toneOf(reason);
  const passes = reason.until ? t('until.time', { until: whenOf(reason.until, now, format, t) }) : t('until.none');
  const dialled = reason.contact?.phone.replace(/[^+0-9]/g, '');
  return (
    <Card edge={tone}>
      <View style={{ gap: space[2], alignItems: 'flex-start' }}>
        <Tag tone={tone} label={t(`today.${word}`)} />
        <Text weight="bold">{whatOf(reason, t, i18n)}</Text>
        <Text>
          {passes} {t(`resolve.${reason.resolvedBy}`)}
        </Text>
        {reason.contact ? (
          <Link href={`tel:${dialled}`} external>
            {t('call', { name: reason.contact.name, phone: reason.contact.phone })}
          </Link>
        ) : null}
      </View>
    </Card>
  );
}

export function RefusalList({ reasons, zone, now }: RefusalListProps) {
  const { i18n } = useTranslation('clearance');
  const format = formatIn(i18n.language, zone);
  return (
    <View role="list" style={{ gap: space[3] }}>
      {reasons.map((reason, index) => (
        <View role="listitem" key={`${reason.code} ${index}`}>
          <RefusalCard reason={reason} now={now} format={format} />
        </View>
      ))}
    </View>
  );
}
