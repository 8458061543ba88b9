/**
 * Set-up, first: switch the stimulator on, find it, see that it is the right one and charged. It must not go on with a stimulator that is
 * not this person's, or on a phone that can keep no record.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { StepShell } from '@/components/layout/StepShell';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Definition } from '@/components/ui/Definition';
import { Link } from '@/components/ui/Link';
import { Notice } from '@/components/ui/Notice';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import type { AnswerOf } from '@/shared/contracts/contract';
import type { ClearanceView } from '@/shared/contracts/clearance';
import type { readOwnDevice } from '@/shared/contracts/permit';
import { leastBatteryPercent } from '@/shared/rules/clearance/equipment';
import type { SetUp } from './use-set-up';

export interface DeviceStepProps {
  setUp: SetUp;
  clearance: ClearanceView;
  device: AnswerOf<typeof readOwnDevice>;
}

export function DeviceStep({ setUp, clearance, device }: DeviceStepProps) {
  const { t } = useTranslation('device');
  const { identity, isFound, isUnkept, view } = setUp;
  const mayUse = device !== null && !device.recalled;
  const isKept = !isUnkept && view.phase !== 'unkept' && (view.device?.recordIsKept ?? true);
  const isLow = isFound && identity !== null && identity.batteryPercent < leastBatteryPercent;
  const call = (
    <Link href={`tel:${clearance.site.phone.replace(/[^+0-9]/g, '')}`} external>
      {t('call', { name: clearance.site.name, phone: clearance.site.phone })}
    </Link>
  );
  return (
    <StepShell
      title={t('find.title')}
      lead={t('find.lead')}
      step={{ value: 1, max: 3, label: t('step', { value: 1, max: 3 }) }}
      onBack={setUp.back}
      footer={
        isFound && identity !== null && isKept ? (
          <Button label={t('find.next')} size="large" grow disabled={isLow} onPress={setUp.toPlacement} />
        ) : (
          <Button
            label={t('find.find')}
            size="large"
            grow
            busy={setUp.isBusy}
            busyLabel={t('find.finding')}
            disabled={!mayUse || view.phase === 'unkept'}
            onPress={() => void setUp.find()}
          />
        )
      }
    >
      {isKept ? null : (
        <Notice tone="stop" title={t('unkept.title')} announce="assertive">
          {t('unkept.text')}
        </Notice>
      )}
      {mayUse ? null : (
        <Notice
          tone="stop"
          title={t(device === null ? 'none.title' : 'recalled.title')}
          announce="polite"
          actions={call}
        >
          {t(device === null ? 'none.text' : 'recalled.text')}
        </Notice>
      )}
      {device === null ? null : (
        <Card heading={device.label} aside={isFound ? <Tag tone="steady" label={t('find.found')} /> : undefined}>
          <Definition
            rows={[
              { label: t('serial'), value: device.serial },
              { label: t('model'), value: device.model },
              ...(isFound && identity !== null
                ? [
                    { label: t('battery'), value: t('percent', { value: identity.batteryPercent }) },
                    { label: t('firmware'), value: identity.firmware },
                  ]
                : []),
            ]}
          />
        </Card>
      )}
      {isLow ? (
        <Notice tone="stop" title={t('batteryLow.title')} announce="polite">
          {t('batteryLow.text')}
        </Notice>
      ) : null}
      {view.device?.isFaulty ? (
        <Notice tone="stop" title={t('refusal.faulty')} announce="polite" actions={call} />
      ) : null}
      <View style={{ gap: space[2] }}>
        <Text size="small" tone="muted">
          {t('find.compare')}
        </Text>
      </View>
    </StepShell>
  );
}
