/**
 * An amendment, old beside new: only what differs.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { useFormat } from '@/components/runtime/format';
import { Card } from '@/components/ui/Card';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import { space, stroke, useTheme } from '@/components/ui/theme';
import type { PrescriptionView } from '@/shared/contracts/prescription';
import { differencesOf } from './differences';
import type { PrescriptionInput } from './PrescriptionEditor';

type After = Pick<PrescriptionInput, 'dose' | 'schedule' | 'assisted'>;

export function ChangesCard({ before, after }: { before: PrescriptionView; after: After }) {
  const { t } = useTranslation('prescription');
  const { colour } = useTheme();
  const format = useFormat();
  const changes = differencesOf(before, after, format, t);
  return (
    <Card heading={t('changes')} aside={<Tag tone="caution" label={t('needsAck')} />}>
      <View role="list">
        {changes.map((change) => (
          <View role="listitem" key={change.label} style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[4], paddingVertical: space[2], borderTopWidth: stroke.hair, borderColor: colour.line }}>
            <View style={{ flexGrow: 1, flexBasis: '40%' }}>
              <Text>{change.label}</Text>
            </View>
            <Text tone="muted" strike digits>
              {change.old}
            </Text>
            <Text weight="bold" digits>
              {change.new}
            </Text>
          </View>
        ))}
        <View role="listitem" style={{ flexDirection: 'row', gap: space[4], paddingVertical: space[2], borderTopWidth: stroke.hair, borderColor: colour.line }}>
          <View style={{ flexGrow: 1, flexBasis: '40%' }}>
            <Text>{t('permits')}</Text>
          </View>
          <Text weight="bold">{t('permitsValue', { count: before.livePermits })}</Text>
        </View>
      </View>
    </Card>
  );
}
