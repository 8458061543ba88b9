/**
 * The diary that a participant shares with this caregiver: what was felt, never a dose.
 */
import { useLocalSearchParams } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { CaregiverShell } from '@/components/layout/CaregiverShell';
import { usePages } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Definition, type DefinitionRow } from '@/components/ui/Definition';
import { Link } from '@/components/ui/Link';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { readSharedDiary } from '@/shared/contracts/caregiver';
import type { AnswerOf } from '@/shared/contracts/contract';

type SharedEntry = AnswerOf<typeof readSharedDiary>['items'][number];

export function SharedPersonScreen() {
  const { t } = useTranslation('caregiver');
  const format = useFormat();
  const { participantId = '' } = useLocalSearchParams<{ participantId: string }>();
  const list = usePages(readSharedDiary, { params: { participantId }, query: {} });
  const entries = list.data?.pages.flatMap((page) => page.items) ?? [];
  const rowsOf = (entry: SharedEntry): DefinitionRow[] => [
    ...(entry.headache === null ? [] : [{ label: t('diary.headache'), value: t('diary.of10', { strength: entry.headache }) }]),
    ...entry.effects.map((effect) => ({ label: t(`diary:effect.${effect.kind}`), value: t('diary.of10', { strength: effect.strength }) })),
    ...(entry.skin === null ? [] : [{ label: t('diary.skin'), value: t(`diary:skin.${entry.skin}`) }]),
  ];
  return (
    <CaregiverShell title={t('diary.title')}>
      <Link href="/shared">{t('diary.back')}</Link>
      {list.isPending ? <LoadingState /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {list.data && entries.length === 0 ? <EmptyState title={t('diary.empty')} /> : null}
      {entries.map((entry) => (
        <Card key={entry.number} heading={t('diary.session', { number: entry.number })} aside={format.dayTime(entry.startedAt)}>
          <Definition layout="rows" rows={rowsOf(entry)} />
        </Card>
      ))}
      {list.hasNextPage ? <Button kind="secondary" grow label={t('diary.older')} busy={list.isFetchingNextPage} onPress={() => void list.fetchNextPage()} /> : null}
    </CaregiverShell>
  );
}
