/**
 * A caregiver's page: what a participant shares, and nothing else. It must not name what the participant is treated for
 * in any part that the shell itself writes.
 */
import type { Href } from 'expo-router';
import type { ReactNode } from 'react';
import { View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Column } from '@/components/layout/Column';
import { PageTitle, SkipLink } from '@/components/layout/page';
import { useShellAccount } from '@/components/layout/shell-account';
import { Button } from '@/components/ui/Button';
import { Link } from '@/components/ui/Link';
import { Mark } from '@/components/ui/Mark';
import { Text } from '@/components/ui/Text';
import { DensityProvider, space, useTheme } from '@/components/ui/theme';

export interface CaregiverShellProps {
  title: string;
  lead?: string;
  /** Back to the list of people, on a person's page. */
  backHref?: Href;
  children?: ReactNode;
  footer?: ReactNode;
  banner?: ReactNode;
}

function CaregiverPage({ title, lead, backHref, children, footer, banner }: CaregiverShellProps) {
  const { t } = useTranslation('common');
  const { colour } = useTheme();
  const account = useShellAccount();
  return (
    <View style={{ flexGrow: 1, backgroundColor: colour.surface }}>
      <SkipLink />
      {banner ?? account.banner}
      <Column
        foot={footer}
        head={
          <View style={{ flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: space[3] }}>
            <View style={{ flexDirection: 'row', alignItems: 'center', gap: space[3], flexGrow: 1 }}>
              <Mark width={28} />
              {backHref ? (
                <Link href={backHref} size="small">
                  {t('nav.people')}
                </Link>
              ) : (
                <Text size="small" weight="bold">
                  {t('product')}
                </Text>
              )}
            </View>
            {account.onSignOut ? (
              <Button kind="quiet" size="small" flush label={t('action.signOut')} onPress={account.onSignOut} />
            ) : null}
          </View>
        }
      >
        <View style={{ gap: space[1], paddingBottom: space[1] }}>
          <PageTitle>{title}</PageTitle>
          {lead ? <Text tone="muted">{lead}</Text> : null}
        </View>
        {children}
      </Column>
    </View>
  );
}

export function CaregiverShell(props: CaregiverShellProps) {
  return (
    <DensityProvider density="reading">
      <CaregiverPage {...props} />
    </DensityProvider>
  );
}
