/**
 * A photo of the skin, if the person wants: what it is used for is said before it is taken, and nothing is kept without a yes. It must not
 * send anything; the diary does, with the photo.
 */
import { useEffect, useMemo, useState } from 'react';
import { Image, View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { CheckboxField } from '@/components/ui/Field';
import { FilePicker } from '@/components/ui/FilePicker';
import { Text } from '@/components/ui/Text';
import { radius, space, useTheme } from '@/components/ui/theme';
import { photoLimits } from '@/shared/rules/house-limits';

export interface PhotoFieldProps {
  photo: File | null;
  onChange(photo: File | null): void;
}

const previewRem = 8;

/** An address for the picture in this page; given back when another is chosen or the page goes. */
function usePreview(photo: File | null): string | null {
  const address = useMemo(
    () => (photo === null || typeof URL.createObjectURL !== 'function' ? null : URL.createObjectURL(photo)),
    [photo],
  );
  useEffect(() => (address === null ? undefined : () => URL.revokeObjectURL(address)), [address]);
  return address;
}

export function PhotoField({ photo, onChange }: PhotoFieldProps) {
  const { t } = useTranslation('diary');
  const { rem } = useTheme();
  const [mayUse, setMayUse] = useState(photo !== null);
  const [isTooLarge, setTooLarge] = useState(false);
  const preview = usePreview(photo);
  const take = (file: File | null) => {
    const large = file !== null && file.size > photoLimits.mostBytes;
    setTooLarge(large);
    onChange(large ? null : file);
  };
  return (
    <Card heading={t('photo.title')} note={t('photo.use')}>
      <CheckboxField
        label={t('photo.consent')}
        value={mayUse}
        onChange={(yes) => {
          setMayUse(yes);
          if (!yes) onChange(null);
        }}
      />
      {mayUse ? (
        <View style={{ gap: space[2] }}>
          <FilePicker
            label={t('photo.choose')}
            chosenName={photo?.name ?? null}
            accept="image/jpeg,image/png,image/webp"
            onChoose={take}
          />
          {isTooLarge ? (
            <Text tone="stop" role="alert">
              {t('photo.tooLarge')}
            </Text>
          ) : null}
        </View>
      ) : null}
      {photo ? (
        <View style={{ flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: space[3] }}>
          {preview ? (
            <Image
              source={{ uri: preview }}
              aria-label={t('photo.preview')}
              style={{ width: rem(previewRem), height: rem(previewRem), borderRadius: radius }}
            />
          ) : null}
          <Button kind="danger" size="small" label={t('photo.remove')} onPress={() => onChange(null)} />
        </View>
      ) : null}
    </Card>
  );
}
