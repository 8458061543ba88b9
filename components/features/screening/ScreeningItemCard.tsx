/**
 * One item of the screening with its class; a yes on a relative one asks for the reason to go on.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Card } from '@/components/ui/Card';
import { Choice } from '@/components/ui/Choice';
import { TextAreaField } from '@/components/ui/Field';
import { Notice } from '@/components/ui/Notice';
import { space } from '@/components/ui/theme';
import type { ScreeningAnswers, ScreeningItem } from '@/shared/rules/screening';

type ItemAnswer = ScreeningAnswers[string];
const answers = ['no', 'yes', 'not_known'] as const;

export interface ScreeningItemCardProps {
  item: ScreeningItem;
  number: number;
  of: number;
  value: ItemAnswer | null;
  onChange(value: ItemAnswer): void;
}

export function ScreeningItemCard({ item, number, of, value, onChange }: ScreeningItemCardProps) {
  const { t } = useTranslation('forms');
  const isYes = value?.answer === 'yes';
  return (
    <Card>
      <View style={{ gap: space[4] }}>
        <Choice
          label={t(`screening.item.${item.id}`)}
          hint={t('screening.itemHint', { number, of, class: t(`screening.class.${item.class}`) })}
          value={value?.answer ?? null}
          onChange={(answer) => onChange({ answer })}
          options={answers.map((answer) => ({ value: answer, label: t(`screening.answer.${answer}`) }))}
        />
        {isYes && item.class === 'absolute' ? <Notice tone="stop" title={t('screening.absolute')} /> : null}
        {isYes && item.class === 'relative' ? (
          <TextAreaField label={t('screening.reason')} hint={t('screening.reasonHint')} rows={2} value={value.reason ?? ''} onChange={(reason) => onChange(reason === '' ? { answer: 'yes' } : { answer: 'yes', reason })} />
        ) : null}
        {value?.answer === 'not_known' ? <Notice tone="caution" title={t('screening.notKnown')} /> : null}
      </View>
    </Card>
  );
}
