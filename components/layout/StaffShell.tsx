/**
 * A page of the panel: the rail, the page's title with what can be done beside it, and the whole width for the work. It
 * must not know what a role may do; the rail is given.
 */
import type { ReactNode } from 'react';
import { View, useWindowDimensions } from 'react-native';
import type { Href } from 'expo-router';
import { useTranslation } from 'react-i18next';
import { PageTitle, SkipLink, mainId } from '@/components/layout/page';
import { Rail, TopBar } from '@/components/layout/Rail';
import { useShellAccount, type RailId } from '@/components/layout/shell-account';
import { Icon } from '@/components/ui/Icon';
import { Link } from '@/components/ui/Link';
import { Text } from '@/components/ui/Text';
import { DensityProvider, phoneBelow, space, useTheme } from '@/components/ui/theme';

export interface Crumb {
  label: string;
  href?: Href;
}

export interface StaffShellProps {
  title: string;
  /** Which place of the rail the page belongs to. */
  place?: RailId;
  /** A tag beside the title: "On hold since 08:12". */
  tag?: ReactNode;
  subtitle?: ReactNode;
  /** The way here, above the title. */
  crumbs?: readonly Crumb[];
  /** Buttons at the end of the title's line, the main one last. */
  actions?: ReactNode;
  children?: ReactNode;
  /** Narrow pages (forms) keep to a width that can be read; the panel uses all of it otherwise. */
  maxRem?: number;
}

function Crumbs({ crumbs }: { crumbs: readonly Crumb[] }) {
  const { t } = useTranslation('common');
  const { rem } = useTheme();
  return (
    <View
      role="navigation"
      aria-label={t('nav.breadcrumb')}
      dataSet={{ print: 'no' }}
      style={{ flexDirection: 'row', flexWrap: 'wrap', alignItems: 'center', gap: space[1] + space.half }}
    >
      {crumbs.map((crumb, index) => (
        <View key={crumb.label} style={{ flexDirection: 'row', alignItems: 'center', gap: space[1] + space.half }}>
          {index > 0 ? <Icon name="forward" tone="muted" size={rem(0.625)} /> : null}
          {crumb.href ? (
            <Link href={crumb.href} size="fine" weight="regular" tone="muted">
              {crumb.label}
            </Link>
          ) : (
            <Text size="fine" tone="muted">
              {crumb.label}
            </Text>
          )}
        </View>
      ))}
    </View>
  );
}

function StaffPage(props: StaffShellProps) {
  const { title, place, tag, subtitle, crumbs, actions, children, maxRem } = props;
  const { colour, rem } = useTheme();
  const { width } = useWindowDimensions();
  const account = useShellAccount();
  const isPhone = width < phoneBelow;
  return (
    <View style={{ flexGrow: 1, backgroundColor: colour.surface, flexDirection: isPhone ? 'column' : 'row' }}>
      <SkipLink />
      {isPhone ? <TopBar current={place} /> : <Rail current={place} />}
      <View style={{ flexGrow: 1, flexShrink: 1, minWidth: 0, ...(isPhone ? {} : { flexBasis: 0 }) }}>
        {account.banner}
        <View
          role="main"
          id={mainId}
          style={{
            width: '100%',
            flexGrow: 1,
            outline: 'none',
            gap: space[6],
            paddingHorizontal: isPhone ? space[4] : space[8],
            paddingTop: isPhone ? space[5] : space[7],
            paddingBottom: space[10],
            ...(maxRem ? { maxWidth: rem(maxRem) } : {}),
          }}
        >
          <View
            style={{
              flexDirection: 'row',
              flexWrap: 'wrap',
              alignItems: 'flex-end',
              columnGap: space[6],
              rowGap: space[4],
            }}
          >
            <View style={{ flexGrow: 1, flexShrink: 1, minWidth: isPhone ? '100%' : rem(18), gap: space[1] }}>
              {crumbs && crumbs.length > 0 ? <Crumbs crumbs={crumbs} /> : null}
              <View
                style={{
                  flexDirection: 'row',
                  flexWrap: 'wrap',
                  alignItems: 'center',
                  columnGap: space[3],
                  rowGap: space[1],
                }}
              >
                <View style={{ flexShrink: 1 }}>
                  <PageTitle>{title}</PageTitle>
                </View>
                {tag}
              </View>
              {typeof subtitle === 'string' ? <Text tone="muted">{subtitle}</Text> : subtitle}
            </View>
            {actions ? (
              <View
                dataSet={{ print: 'no' }}
                style={{
                  flexDirection: 'row',
                  flexWrap: 'wrap',
                  alignItems: 'center',
                  flexShrink: 1,
                  maxWidth: '100%',
                  gap: space[3],
                }}
              >
                {actions}
              </View>
            ) : null}
          </View>
          {children}
        </View>
      </View>
    </View>
  );
}

export function StaffShell(props: StaffShellProps) {
  return (
    <DensityProvider density="panel">
      <StaffPage {...props} />
    </DensityProvider>
  );
}
