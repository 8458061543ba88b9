/**
 * The diary's other pages: headache, skin, redness the next day, what was serious and free words. Each holds one question. They must not say
 * what an answer leads to, but for advice, which the screen puts first.
 */
import { useTranslation } from 'react-i18next';
import { Chips, Choice } from '@/components/ui/Choice';
import { TextAreaField } from '@/components/ui/Field';
import { ScaleInput } from '@/components/ui/ScaleInput';
import { skinChoices } from '@/shared/rules/lockout';
import { redFlags } from '@/shared/values/codes';
import type { DiaryDraft } from './diary-draft';
import { PhotoField, type PhotoFieldProps } from './PhotoField';

interface PageProps {
  draft: DiaryDraft;
  onChange(draft: DiaryDraft): void;
}
const none = 'none';

export function HeadachePage({ draft, onChange, title }: PageProps & { title: string }) {
  const { t } = useTranslation('diary');
  return (
    <ScaleInput
      label={title}
      hideLabel
      lowLabel={t('headache.low')}
      highLabel={t('headache.high')}
      value={draft.headache}
      onChange={(headache) => onChange({ ...draft, headache })}
    />
  );
}

export function SkinPage({ draft, onChange, photo }: PageProps & { photo: PhotoFieldProps }) {
  const { t } = useTranslation('diary');
  return (
    <>
      <Choice
        label={t('skin.title')}
        hideLabel
        options={skinChoices.map((value) => ({ value, label: t(`skin.${value}`) }))}
        value={draft.skin}
        onChange={(skin) => onChange({ ...draft, skin })}
      />
      <PhotoField {...photo} />
    </>
  );
}

export function RednessPage({ draft, onChange, photo }: PageProps & { photo: PhotoFieldProps }) {
  const { t } = useTranslation('diary');
  return (
    <>
      <Choice
        label={t('redness.title')}
        hideLabel
        options={[
          { value: 'no', label: t('redness.no') },
          { value: 'yes', label: t('redness.yes') },
        ]}
        value={draft.rednessStillThere === null ? null : draft.rednessStillThere ? 'yes' : 'no'}
        onChange={(value) => onChange({ ...draft, rednessStillThere: value === 'yes' })}
      />
      {draft.rednessStillThere === true ? <PhotoField {...photo} /> : null}
    </>
  );
}

export function FlagsPage({ draft, onChange }: PageProps) {
  const { t } = useTranslation('diary');
  const chosen: string[] = draft.redFlags === null ? [] : draft.redFlags.length === 0 ? [none] : draft.redFlags;
  const choose = (values: readonly string[]) =>
    onChange({ ...draft, redFlags: values.length === 0 ? null : redFlags.filter((flag) => values.includes(flag)) });
  return (
    <>
      <Chips
        label={t('flags.title')}
        hideLabel
        options={[
          { value: none, label: t('flags.none') },
          ...redFlags.map((flag) => ({ value: flag, label: t(`redFlag.${flag}`) })),
        ]}
        values={chosen}
        exclusive={[none]}
        onChange={choose}
      />
      <TextAreaField
        label={t('freeText.label')}
        hint={t('freeText.hint')}
        optional
        value={draft.freeText}
        maxLength={2000}
        onChange={(freeText) => onChange({ ...draft, freeText })}
      />
    </>
  );
}
