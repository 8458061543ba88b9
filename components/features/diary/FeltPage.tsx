/**
 * What was felt, as large chips, and for each how strong and whether it is still there. "Nothing" is chosen, never assumed.
 */
import { useTranslation } from 'react-i18next';
import { Card } from '@/components/ui/Card';
import { Chips, Choice } from '@/components/ui/Choice';
import { ScaleInput } from '@/components/ui/ScaleInput';
import type { EffectKind } from '@/shared/values/codes';
import { askedEffects, withEffects, type DiaryDraft } from './diary-draft';

const nothing = 'nothing';

export function FeltPage({ draft, onChange }: { draft: DiaryDraft; onChange(draft: DiaryDraft): void }) {
  const { t } = useTranslation('diary');
  const chosen = draft.nothingFelt ? [nothing] : draft.effects.map(({ kind }) => kind);
  const choose = (values: readonly string[]) => {
    const kinds = askedEffects.filter((kind) => values.includes(kind));
    onChange(withEffects(draft, kinds, values.includes(nothing)));
  };
  const set = (kind: EffectKind, change: Partial<DiaryDraft['effects'][number]>) =>
    onChange({
      ...draft,
      effects: draft.effects.map((effect) => (effect.kind === kind ? { ...effect, ...change } : effect)),
    });
  return (
    <>
      <Chips
        label={t('felt.title')}
        hideLabel
        options={[
          ...askedEffects.map((kind) => ({ value: kind, label: t(`effect.${kind}`) })),
          { value: nothing, label: t('felt.nothing') },
        ]}
        values={chosen}
        exclusive={[nothing]}
        onChange={choose}
      />
      {draft.effects.map((effect) => (
        <Card key={effect.kind}>
          <ScaleInput
            label={t(`effect.${effect.kind}`)}
            hint={t('felt.strongest')}
            lowLabel={t('felt.low')}
            highLabel={t('felt.high')}
            min={1}
            value={effect.strength}
            onChange={(strength) => set(effect.kind, { strength })}
          />
          <Choice
            label={t('felt.stillThere', { what: t(`effect.${effect.kind}`) })}
            hideLabel
            options={[
              { value: 'there', label: t('felt.there') },
              { value: 'gone', label: t('felt.gone') },
            ]}
            value={effect.stillThere === null ? null : effect.stillThere ? 'there' : 'gone'}
            onChange={(value) => set(effect.kind, { stillThere: value === 'there' })}
          />
        </Card>
      ))}
    </>
  );
}
