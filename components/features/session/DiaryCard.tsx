/**
 * One page of a diary as staff read it: what was felt and how strongly, skin, free text, photos, and what it locked.
 */
import { Image, View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { useFormat } from '@/components/runtime/format';
import { Card } from '@/components/ui/Card';
import { Definition, type DefinitionRow } from '@/components/ui/Definition';
import { Link } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { radius, space, useTheme } from '@/components/ui/theme';
import type { DiaryView } from '@/shared/contracts/session';

const photoRem = 10;

export function DiaryCard({ title, diary, none, zone }: { title: string; diary: DiaryView | null; none: string; zone: string }) {
  const { t } = useTranslation('sessions');
  const { rem } = useTheme();
  const format = useFormat(zone);
  if (!diary) {
    return (
      <Card heading={title}>
        <Text tone="muted">{none}</Text>
      </Card>
    );
  }
  return (
    <Card heading={title} aside={format.dayTime(diary.writtenAt)}>
      <View style={{ gap: space[4] }}>
        {diary.lockouts.map((lockout) => (
          <Notice
            key={lockout.code}
            {...(lockout.level === 'flag' ? { tone: 'caution' } : { tone: 'stop', word: t('participants:state.held') })}
            title={t(`worklist:why.${lockout.code}`)}
          />
        ))}
        <Definition layout="rows" rows={rowsOf(diary, t)} />
        {diary.after?.freeText ? <Text>{t('quoted', { text: diary.after.freeText })}</Text> : null}
        <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[3] }}>
          {diary.photos.map((photo, index) => (
            <Link key={photo.id} href={`/api/photos/${photo.id}`} external accessibleLabel={t('photo', { number: index + 1, at: format.dayTime(photo.takenAt) })}>
              <Image source={{ uri: `/api/photos/${photo.id}` }} aria-label={t('photo', { number: index + 1, at: format.dayTime(photo.takenAt) })} style={{ width: rem(photoRem), height: rem(photoRem), borderRadius: radius }} />
            </Link>
          ))}
        </View>
      </View>
    </Card>
  );
}

function rowsOf(diary: DiaryView, t: ReturnType<typeof useTranslation>['t']): DefinitionRow[] {
  const { after, nextDay } = diary;
  if (after) {
    return [
      { label: t('headacheAfter'), value: t('of10', { strength: after.headacheAfter }) },
      ...(after.nothingFelt ? [{ label: t('feltLabel'), value: t('nothing') }] : []),
      // Said once: the headache has a row of its own above.
      ...after.effects.filter(({ kind, strength }) => kind !== 'headache' || strength !== after.headacheAfter).map((effect) => ({ label: t(`diary:effect.${effect.kind}`), value: t(effect.stillThere ? 'of10Still' : 'of10', { strength: effect.strength }) })),
      { label: t('skinLabel'), value: t(`diary:skin.${after.skin}`) },
    ];
  }
  return nextDay ? Object.entries(nextDay).flatMap(([name, value]) => (typeof value === 'number' ? [{ label: t(`next.${name}`), value: t('of10', { strength: value }) }] : typeof value === 'boolean' ? [{ label: t(`next.${name}`), value: t(value ? 'yes' : 'no') }] : [])) : [];
}
