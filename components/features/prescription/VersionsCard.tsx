/**
 * Every version with who signed it, when, and whether it is in force and confirmed.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { useFormat } from '@/components/runtime/format';
import { Card } from '@/components/ui/Card';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { space, stroke, useTheme } from '@/components/ui/theme';
import type { PrescriptionView } from '@/shared/contracts/prescription';

export function VersionsCard({ versions, zone }: { versions: readonly PrescriptionView[]; zone: string }) {
  const { t } = useTranslation('prescription');
  const { colour } = useTheme();
  const format = useFormat(zone);
  return (
    <Card heading={t('versions')}>
      <View role="list">
        {versions.map((version) => (
          <View
            role="listitem"
            key={version.id}
            style={{ gap: space[1], paddingVertical: space[3], borderTopWidth: stroke.hair, borderColor: colour.line }}
          >
            <Text weight="bold">
              {version.version === null
                ? t('draftRow', { intensity: format.number(version.dose.intensityMilliamp) })
                : t('versionRow', {
                    version: version.version,
                    intensity: format.number(version.dose.intensityMilliamp),
                    status: t(`status.${version.status}`),
                  })}
            </Text>
            {version.signatures.map((signature) => (
              <Text key={signature.meaning} size="small" tone="muted">
                {t('signedBy', {
                  name: signature.name,
                  meaning: t(`meanings.${signature.meaning}`),
                  at: format.dayTime(signature.at),
                })}
              </Text>
            ))}
            {version.isIntact ? null : (
              <Notice tone="stop" title={t('notValid')}>
                {t('notValidHelp')}
              </Notice>
            )}
            {version.status === 'signed' ? (
              <Text size="small">
                {version.acknowledgedAt
                  ? t('acknowledged', { at: format.dayTime(version.acknowledgedAt) })
                  : t('notAcknowledged')}
              </Text>
            ) : null}
            {version.reason ? <Text size="small">{t('sessions:quoted', { text: version.reason })}</Text> : null}
          </View>
        ))}
      </View>
    </Card>
  );
}
