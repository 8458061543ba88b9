/**
 * Chooses one file. The browser's own control speaks the browser's language and looks like nothing here, so it stays hidden behind a
 * button of ours; what was chosen is named beside it. It must not read the file or judge it.
 */
import { useRef } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';

export interface FilePickerProps {
  /** What kind of file, and for what. */
  label: string;
  /** The name of the file that is chosen; null for none. */
  chosenName: string | null;
  /** Types as the browser's control takes them. */
  accept: string;
  onChoose(file: File | null): void;
}

export function FilePicker({ label, chosenName, accept, onChoose }: FilePickerProps) {
  const { t } = useTranslation('common');
  const input = useRef<HTMLInputElement>(null);
  return (
    <View style={{ flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: space[3] }}>
      <input
        ref={input}
        type="file"
        hidden
        aria-label={label}
        accept={accept}
        onChange={(event) => {
          onChoose(event.target.files?.[0] ?? null);
          // The same file, mended, can be chosen again.
          event.target.value = '';
        }}
      />
      <Button kind="secondary" label={label} onPress={() => input.current?.click()} />
      <Text tone="muted" role="status">
        {chosenName ?? t('noFile')}
      </Text>
    </View>
  );
}
