/**
 * A page before signing in: mark, title, one column. It must not say whether an address is known here.
 */
import type { ReactNode } from 'react';
import { View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Column } from '@/components/layout/Column';
import { PageTitle, SkipLink } from '@/components/layout/page';
import { useShellAccount } from '@/components/layout/shell-account';
import { Mark } from '@/components/ui/Mark';
import { Text } from '@/components/ui/Text';
import { DensityProvider, readingColumnRem, space, useTheme } from '@/components/ui/theme';

export interface PublicShellProps {
  title: string;
  lead?: string;
  children?: ReactNode;
  footer?: ReactNode;
  /** For pages with a list beside the form (demo accounts, mailbox). */
  wide?: boolean;
}

function PublicPage({ title, lead, children, footer, wide }: PublicShellProps) {
  const { t } = useTranslation('common');
  const { colour } = useTheme();
  const account = useShellAccount();
  return (
    <View style={{ flexGrow: 1, backgroundColor: colour.surface }}>
      <SkipLink />
      {account.banner}
      <Column
        widthRem={wide ? readingColumnRem * 2 : readingColumnRem - 6}
        foot={footer}
        head={
          <View style={{ flexDirection: 'row', alignItems: 'center', gap: space[3], paddingTop: space[4] }}>
            <Mark />
            <Text size="lead" weight="bold">
              {t('product')}
            </Text>
          </View>
        }
      >
        <View style={{ gap: space[2], paddingTop: space[8], paddingBottom: space[2] }}>
          <PageTitle>{title}</PageTitle>
          {lead ? <Text tone="muted">{lead}</Text> : null}
        </View>
        {children}
      </Column>
    </View>
  );
}

export function PublicShell(props: PublicShellProps) {
  return (
    <DensityProvider density="reading">
      <PublicPage {...props} />
    </DensityProvider>
  );
}
