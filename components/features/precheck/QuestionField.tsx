/**
 * One question of the pre-check as large answers, a scale or a number. It must not say what an answer leads to; the page
 * does, beside it.
 */
import { useTranslation } from 'react-i18next';
import { Chips, Choice } from '@/components/ui/Choice';
import { NumberField } from '@/components/ui/Field';
import { ScaleInput } from '@/components/ui/ScaleInput';
import { precheckAnswersSchema, type PrecheckAnswers, type PrecheckQuestion } from '@/shared/rules/precheck';

export interface QuestionFieldProps {
  question: PrecheckQuestion;
  answers: PrecheckAnswers;
  /** The page's heading is this question. */
  isAlone: boolean;
  onAnswer(change: PrecheckAnswers): void;
}

/** A value that is no answer to this question is none: unknown stays unknown. */
function changeOf(question: PrecheckQuestion, value: unknown): PrecheckAnswers {
  const parsed = precheckAnswersSchema.safeParse({ [question.field]: value });
  return parsed.success ? parsed.data : { [question.field]: undefined };
}

/** Stands for "none of them" in a list where several may hold. */
const none = 'none';

export function QuestionField({ question, answers, isAlone, onAnswer }: QuestionFieldProps) {
  const { t } = useTranslation('precheck');
  const held = answers[question.field];
  const label = t(`question.${question.id}`);
  const answer = (value: unknown) => onAnswer(changeOf(question, value));
  const { choices = [] } = question;
  switch (question.kind) {
    case 'since_last':
      return (
        <Choice
          label={label}
          hideLabel={isAlone}
          options={choices.map((value) => ({ value, label: t(`since.${value}`) }))}
          value={typeof held === 'string' ? held : null}
          onChange={answer}
        />
      );
    case 'choice':
      return (
        <Choice
          label={label}
          hideLabel={isAlone}
          options={choices.map((value) => ({ value, label: t(`answer.${question.id}.${value}`) }))}
          value={typeof held === 'string' ? held : null}
          onChange={answer}
        />
      );
    case 'yes_no':
      return (
        <Choice
          label={label}
          hideLabel={isAlone}
          options={[
            { value: 'no', label: t('yesNo.no') },
            { value: 'yes', label: t('yesNo.yes') },
          ]}
          value={typeof held === 'boolean' ? (held ? 'yes' : 'no') : null}
          onChange={(value) => answer(value === 'yes')}
        />
      );
    case 'choices': {
      const chosen = Array.isArray(held) ? (held.length === 0 ? [none] : held) : [];
      return (
        <Chips
          label={label}
          hideLabel={isAlone}
          options={[
            { value: none, label: t(`answer.${question.id}.none`) },
            ...choices.map((value) => ({ value, label: t(`answer.${question.id}.${value}`) })),
          ]}
          exclusive={[none]}
          values={chosen}
          onChange={(values) => answer(values.length === 0 ? undefined : values.filter((value) => value !== none))}
        />
      );
    }
    case 'scale':
      return (
        <ScaleInput
          label={label}
          hideLabel={isAlone}
          lowLabel={t(`answer.${question.id}.low`)}
          highLabel={t(`answer.${question.id}.high`)}
          min={question.min}
          max={question.max}
          value={typeof held === 'number' ? held : null}
          onChange={answer}
        />
      );
    case 'number':
      return (
        <NumberField
          label={label}
          hideLabel={isAlone}
          optional={question.isOptional}
          unit={question.unit ? t(`unit.${question.unit}`) : undefined}
          value={typeof held === 'number' ? held : null}
          onChange={(value) => answer(value ?? undefined)}
        />
      );
  }
}
