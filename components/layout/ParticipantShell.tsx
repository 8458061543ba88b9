/**
 * A participant's page: one sentence of state on top, a column to read, one main button at the bottom, and the bar
 * Today · Diary · Course · Help. It must not hold more than one main button.
 */
import { Link as RouterLink, type Href } from 'expo-router';
import { useState, type ReactNode } from 'react';
import { View, type TextStyle } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Column, useIsRoomy } from '@/components/layout/Column';
import { PageTitle, SkipLink } from '@/components/layout/page';
import { useShellAccount } from '@/components/layout/shell-account';
import { Icon } from '@/components/ui/Icon';
import { Link } from '@/components/ui/Link';
import { Text } from '@/components/ui/Text';
import { DensityProvider, fontFamily, readingColumnRem, space, stroke, useTheme } from '@/components/ui/theme';

export type ParticipantTab = 'today' | 'diary' | 'course' | 'help';

export interface ParticipantShellProps {
  /** One sentence of state, the page's heading. */
  title: string;
  /** Which tab the page belongs to; none for a page beside them (messages, me). */
  tab?: ParticipantTab;
  /** Shown at the head's start: the day, or where one is. */
  date?: string;
  /** Shown at the head's end; the person's name, leading to their own page, unless given. */
  headEnd?: ReactNode;
  /** `huge` for the one number that counts while a session runs. */
  titleSize?: 'display' | 'huge';
  /** A line under the heading. */
  lead?: string;
  children?: ReactNode;
  /** The one main button, and at most one beside it. */
  footer?: ReactNode;
  /** What must be seen before all else: no network, an emergency text. */
  banner?: ReactNode;
  /** While a session is running nothing leads away. */
  hideTabs?: boolean;
}

const tabs: readonly { id: ParticipantTab; href: Href }[] = [
  { id: 'today', href: '/today' },
  { id: 'diary', href: '/diary' },
  { id: 'course', href: '/course' },
  { id: 'help', href: '/help' },
];
/** Height of the bar in rem; the foot above it must know it. */
const barRem = 3.75;

function TabLink({ id, href, isCurrent }: { id: ParticipantTab; href: Href; isCurrent: boolean }) {
  const { t } = useTranslation('common');
  const { colour, type, rem } = useTheme();
  const [isOver, setOver] = useState(false);
  const tone = isCurrent ? 'action' : isOver ? 'ink' : 'muted';
  const style: TextStyle = {
    ...type('fine'),
    display: 'flex',
    flex: 1,
    flexDirection: 'column',
    alignItems: 'center',
    justifyContent: 'center',
    gap: space.half,
    height: rem(barRem),
    fontFamily,
    fontWeight: isCurrent ? '700' : '400',
    color: colour[tone],
    textDecorationLine: 'none',
    borderTopWidth: stroke.bold - stroke.hair,
    borderColor: isCurrent ? colour.action : 'transparent',
  };
  return (
    <RouterLink
      href={href}
      aria-current={isCurrent ? 'page' : undefined}
      onPointerEnter={() => setOver(true)}
      onPointerLeave={() => setOver(false)}
      style={style}
    >
      <Icon name={id} tone={tone} size={rem(1.25)} />
      {t(`nav.${id}`)}
    </RouterLink>
  );
}

function TabBar({ current }: { current?: ParticipantTab }) {
  const { t } = useTranslation('common');
  const { colour, rem } = useTheme();
  const isRoomy = useIsRoomy();
  return (
    <View
      role="navigation"
      aria-label={t('nav.main')}
      dataSet={{ print: 'no' }}
      style={{
        ...(isRoomy ? { position: 'sticky', bottom: space[0] } : {}),
        zIndex: 2,
        backgroundColor: colour.raised,
        borderTopWidth: stroke.hair,
        borderColor: colour.line,
      }}
    >
      <View style={{ flexDirection: 'row', width: '100%', maxWidth: rem(readingColumnRem), alignSelf: 'center' }}>
        {tabs.map((tab) => (
          <TabLink key={tab.id} {...tab} isCurrent={tab.id === current} />
        ))}
      </View>
    </View>
  );
}

function ParticipantPage(props: ParticipantShellProps) {
  const { title, titleSize, tab, date, headEnd, lead, children, footer, banner, hideTabs } = props;
  const { colour, rem } = useTheme();
  const account = useShellAccount();
  const name =
    account.personName && account.accountHref && !hideTabs ? (
      <Link href={account.accountHref} size="small" weight="regular" tone="muted" plain>
        {account.personName}
      </Link>
    ) : null;
  return (
    <View style={{ flexGrow: 1, backgroundColor: colour.surface }}>
      <SkipLink />
      {banner ?? account.banner}
      <Column
        footOffset={hideTabs ? 0 : rem(barRem) + stroke.hair}
        foot={footer}
        footAlways={hideTabs}
        head={
          <View
            style={{
              flexDirection: 'row',
              flexWrap: 'wrap',
              justifyContent: 'space-between',
              alignItems: 'baseline',
              gap: space[3],
            }}
          >
            <Text size="small" tone="muted">
              {date ?? ''}
            </Text>
            {headEnd ?? name}
          </View>
        }
      >
        <View style={{ gap: space[1], paddingBottom: space[1] }}>
          <PageTitle size={titleSize}>{title}</PageTitle>
          {lead ? <Text tone="muted">{lead}</Text> : null}
        </View>
        {children}
      </Column>
      {hideTabs ? null : <TabBar current={tab} />}
    </View>
  );
}

export function ParticipantShell(props: ParticipantShellProps) {
  return (
    <DensityProvider density="reading">
      <ParticipantPage {...props} />
    </DensityProvider>
  );
}
