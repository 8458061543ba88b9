/**
 * The pre-check, one question a page: is today a safe day for a session? Each answer's consequence stands beside it at once; Back forgets
 * nothing. The outcome is the server's.
 */
import { useRouter } from 'expo-router';
import { View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { RefusalList } from '@/components/features/clearance/pictures/RefusalList';
import { ParticipantShell } from '@/components/layout/ParticipantShell';
import { StepShell } from '@/components/layout/StepShell';
import { Button } from '@/components/ui/Button';
import { TextField } from '@/components/ui/Field';
import { Notice } from '@/components/ui/Notice';
import { FailedState, LoadingState } from '@/components/ui/States';
import { space } from '@/components/ui/theme';
import type { PrecheckAnswers, PrecheckQuestion } from '@/shared/rules/precheck';
import { ConsequenceNotice } from './ConsequenceNotice';
import { OutcomePage } from './OutcomePage';
import { consequenceOfPage, isOneTouch, noneOf } from './precheck-pages';
import { QuestionField } from './QuestionField';
import { usePrecheck, type Precheck } from './use-precheck';

export function PrecheckScreen() {
  const { t } = useTranslation('precheck');
  const router = useRouter();
  const precheck = usePrecheck();
  switch (precheck.state) {
    case 'loading':
      return (
        <ParticipantShell title={t('loading')} tab="today">
          <LoadingState lines={4} />
        </ParticipantShell>
      );
    case 'failed':
      return (
        <ParticipantShell title={t('failed')} tab="today">
          <FailedState title={t('failed')} detail={t('failedDetail')} onRetry={precheck.retry} />
        </ParticipantShell>
      );
    case 'not_now':
      return (
        <ParticipantShell
          title={t('notNow')}
          tab="today"
          footer={<Button label={t('outcome.today')} size="large" grow onPress={() => router.replace('/today')} />}
        >
          <RefusalList
            reasons={precheck.clearance.reasons}
            zone={precheck.clearance.zone}
            now={precheck.clearance.asOf}
          />
        </ParticipantShell>
      );
    case 'answered':
      return <OutcomePage clearance={precheck.clearance} view={precheck.view} onAgain={precheck.again} />;
    case 'asking':
      return <QuestionPage precheck={precheck} />;
  }
}

function QuestionPage({ precheck }: { precheck: Precheck }) {
  const { t } = useTranslation('precheck');
  const router = useRouter();
  const { page, answers, clearance, consequence } = precheck;
  const [first] = page.questions;
  const isAlone = page.questions.length === 1 && first !== undefined;
  const isReadyAndNot = page.name === 'ready' && answers.ready === false;
  const isCodeMissing =
    page.name === 'helper' && answers.helperPresent === true && !/^[0-9]{6}$/.test(precheck.helperCode);
  const none = noneOf[page.name];
  // An emergency waits for no other answer of the page.
  const isUrgent = consequence.outcome === 'emergency';

  const onAnswer = (question: PrecheckQuestion, change: PrecheckAnswers) => {
    const given = { ...answers, ...change };
    const facts = { ...clearance.precheckFacts, waveform: clearance.dose?.waveform, zone: clearance.zone };
    const isPlain = consequenceOfPage(page, given, facts).outcome === 'go_on';
    // One touch goes on, unless there is something to read or write first.
    const goesOn =
      isOneTouch(page) && isPlain && page.name !== 'unwell' && page.name !== 'helper' && given.ready !== false;
    if (goesOn && given[question.field] !== undefined) precheck.next(given);
    else precheck.answer(change);
  };

  return (
    <StepShell
      title={t(isAlone ? `question.${first.id}` : `page.${page.name}`)}
      lead={t(`hint.${page.name}`)}
      step={{ value: precheck.pageNumber, max: precheck.pageCount }}
      onBack={precheck.back ?? (() => router.replace('/today'))}
      footer={
        <View style={{ gap: space[3] }}>
          {precheck.problem ? <SendProblem precheck={precheck} /> : null}
          <Button
            label={t(isUrgent ? 'sendNow' : precheck.isLast ? 'send' : 'next')}
            size="large"
            grow
            busy={precheck.isSending}
            disabled={!isUrgent && (!precheck.isPageAnswered || isReadyAndNot || isCodeMissing)}
            onPress={() => precheck.next()}
          />
        </View>
      }
    >
      {consequence.outcome === 'emergency' ? (
        <ConsequenceNotice consequence={consequence} site={clearance.site} />
      ) : null}
      {none ? (
        <Button
          kind="secondary"
          grow
          label={t(`none.${page.name}`)}
          onPress={() => precheck.next({ ...answers, ...none })}
        />
      ) : null}
      <View style={{ gap: space[6] }}>
        {page.questions.map((question) => (
          <QuestionField
            key={question.id}
            question={question}
            answers={answers}
            isAlone={isAlone}
            onAnswer={(change) => onAnswer(question, change)}
          />
        ))}
      </View>
      {page.name === 'helper' && answers.helperPresent === true ? (
        <TextField
          label={t('helperCode.label')}
          hint={t('helperCode.hint')}
          value={precheck.helperCode}
          onChange={precheck.setHelperCode}
          keyboard="number-pad"
          autoComplete="one-time-code"
          maxLength={6}
          error={precheck.problem?.problem.code === 'precheck.helper_code_wrong' ? t('helperCode.wrong') : undefined}
        />
      ) : null}
      {page.name === 'helper' && answers.helperPresent === false ? (
        <Notice tone="stop" title={t('helperAbsent.title')} announce="polite">
          {t('helperAbsent.text')}
        </Notice>
      ) : null}
      {isReadyAndNot ? (
        <Notice tone="caution" title={t('notReady.title')} announce="polite">
          {t('notReady.text')}
        </Notice>
      ) : null}
      {consequence.outcome === 'emergency' ? null : (
        <ConsequenceNotice consequence={consequence} site={clearance.site} />
      )}
    </StepShell>
  );
}

function SendProblem({ precheck }: { precheck: Precheck }) {
  const { t } = useTranslation('precheck');
  const { problem, clearance } = precheck;
  if (!problem) return null;
  if (problem.problem.code === 'precheck.helper_code_wrong') {
    return (
      <Notice tone="stop" title={t('helperCode.wrong')} announce="assertive">
        {t('helperCode.goBack')}
      </Notice>
    );
  }
  return (
    <Notice tone="stop" title={t(problem.offline ? 'sendFailed.offline' : 'sendFailed.refused')} announce="assertive">
      {t('sendFailed.help', { name: clearance.site.name, phone: clearance.site.phone })}
    </Notice>
  );
}
