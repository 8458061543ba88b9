/**
 * All keys of the panel, on one sheet.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Dialog } from '@/components/ui/Dialog';
import { KeyHint } from '@/components/ui/KeyHint';
import { space } from '@/components/ui/theme';

const keys = [
  { keys: ['j'], word: 'down' },
  { keys: ['k'], word: 'up' },
  { keys: ['Enter'], word: 'open' },
  { keys: ['a'], word: 'claim' },
  { keys: ['/'], word: 'find' },
  { keys: ['?'], word: 'all' },
] as const;

export function KeysDialog({ open, onClose }: { open: boolean; onClose(): void }) {
  const { t } = useTranslation('worklist');
  return (
    <Dialog open={open} title={t('keys.title')} onClose={onClose}>
      <View style={{ gap: space[3] }}>
        {keys.map((key) => (
          <KeyHint key={key.word} keys={key.keys} label={t(`keys.${key.word}`)} />
        ))}
      </View>
    </Dialog>
  );
}
