/**
 * The diary after a session, or the next day's questions: one page at a time, kept at each touch. Advice stands first as soon as an answer
 * asks for help. It must not say "sent" of what only this phone has.
 */
import { useRouter, type Href } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { EmergencyAdvice } from '@/components/features/session/pictures/EmergencyAdvice';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { StepShell } from '@/components/layout/StepShell';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { space } from '@/components/ui/theme';
import { urgentOf, type DiaryDraft } from './diary-draft';
import { FlagsPage, HeadachePage, RednessPage, SkinPage } from './DiaryPages';
import { FeltPage } from './FeltPage';
import { useDiary, type Diary } from './use-diary';

export function DiaryScreen() {
  const { t } = useTranslation('diary');
  const router = useRouter();
  const diary = useDiary();
  const { session, draft, kind } = diary;
  const isUnknown = session.isError && !session.error.offline && session.data === undefined;
  if (isUnknown) {
    return (
      <ParticipantShell title={t('failed')} tab="diary">
        <FailedState title={t('failed')} detail={t('failedDetail')} onRetry={() => void session.refetch()} />
      </ParticipantShell>
    );
  }
  // Without a network the diary can be written all the same: the session is known by its address.
  if (draft === null || (session.data === undefined && !session.failureReason?.offline)) {
    return (
      <ParticipantShell title={t('loading')} tab="diary">
        <LoadingState lines={4} />
      </ParticipantShell>
    );
  }
  const written = kind === 'after' ? session.data?.diary : session.data?.nextDay;
  if (written) {
    const to = `/receipt/${written.sessionId}` satisfies Href;
    return (
      <ParticipantShell
        title={t('written.title')}
        tab="diary"
        footer={<Button size="large" grow label={t('written.receipt')} onPress={() => router.replace(to)} />}
      >
        <EmptyState title={t('written.what')}>{t('written.text')}</EmptyState>
      </ParticipantShell>
    );
  }
  return <DiaryPageView diary={diary} draft={draft} />;
}

function DiaryPageView({ diary, draft }: { diary: Diary; draft: DiaryDraft }) {
  const { t } = useTranslation('diary');
  const { page, site, session } = diary;
  const urgent = urgentOf(draft);
  const title = page === 'headache' ? t(`headache.title.${diary.kind}`) : t(`${page}.title`);
  const photo = { photo: diary.photo, onChange: diary.setPhoto };
  const place = t('place', { value: diary.pageNumber, max: diary.pageCount });
  const number = session.data?.number;
  return (
    <StepShell
      title={title}
      lead={page === 'felt' && number !== undefined ? t('after', { number }) : t(`${page}.lead`)}
      step={{ value: diary.pageNumber, max: diary.pageCount, label: place }}
      onBack={diary.back}
      footer={
        <View style={{ gap: space[3] }}>
          {diary.failure ? (
            <Notice
              tone="stop"
              title={t(diary.failure === 'unkept' ? 'sendFailed.unkept' : 'sendFailed.refused')}
              announce="assertive"
            >
              {site ? t('sendFailed.help', { name: site.name, phone: site.phone }) : t('sendFailed.again')}
            </Notice>
          ) : null}
          <Button
            size="large"
            grow
            label={t(diary.isLast ? 'send' : 'next')}
            busy={diary.isSending}
            disabled={!diary.isAnswered}
            reason={diary.isAnswered ? undefined : t(`${page}.waiting`)}
            onPress={diary.next}
          />
        </View>
      }
    >
      {urgent && site ? (
        <EmergencyAdvice code={urgent} emergencyNumber={site.emergencyNumber} siteName={site.name} phone={site.phone} />
      ) : null}
      {page === 'felt' ? <FeltPage draft={draft} onChange={diary.change} /> : null}
      {page === 'headache' ? <HeadachePage draft={draft} onChange={diary.change} title={title} /> : null}
      {page === 'skin' ? <SkinPage draft={draft} onChange={diary.change} photo={photo} /> : null}
      {page === 'redness' ? <RednessPage draft={draft} onChange={diary.change} photo={photo} /> : null}
      {page === 'flags' ? <FlagsPage draft={draft} onChange={diary.change} /> : null}
    </StepShell>
  );
}
