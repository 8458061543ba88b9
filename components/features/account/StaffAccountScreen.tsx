/**
 * A member of staff's own page: second factor, password, how pages look.
 */
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { StaffShell } from '@/components/layout/StaffShell';
import { useMe } from '@/components/runtime/me';
import { Card } from '@/components/ui/Card';
import { Definition } from '@/components/ui/Definition';
import { LoadingState } from '@/components/ui/States';
import { space } from '@/components/ui/theme';
import { AppearanceCard } from './AppearanceCard';
import { PasswordCard } from './PasswordCard';
import { SecondFactorCard } from './SecondFactorCard';

const formRem = 40;

export function StaffAccountScreen() {
  const { t } = useTranslation('staff');
  const me = useMe();
  return (
    <StaffShell title={t('account.title')} maxRem={formRem}>
      {me ? (
        <View style={{ gap: space[5] }}>
          <Card>
            <Definition
              layout="rows"
              rows={[
                { label: t('account.name'), value: me.account.name },
                { label: t('account.email'), value: me.account.email },
                { label: t('account.role'), value: t(`public:role.${me.account.role}`) },
                { label: t('account.sites'), value: me.sites.map((site) => site.name).join(', ') },
              ]}
            />
          </Card>
          <SecondFactorCard enabled={me.secondFactor.enabled} required={me.secondFactor.required} />
          <PasswordCard />
          <AppearanceCard />
        </View>
      ) : (
        <LoadingState />
      )}
    </StaffShell>
  );
}
