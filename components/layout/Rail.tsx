/**
 * The panel's navigation: a rail at the start of a wide window, a bar with a menu on a phone; site and person at its
 * end. It must not hold anything but ways to places and out.
 */
import { Link as RouterLink } from 'expo-router';
import { useState } from 'react';
import { View, type TextStyle } from 'react-native';
import { useTranslation } from 'react-i18next';
import { useShellAccount, type RailId, type RailItem } from '@/components/layout/shell-account';
import { Button } from '@/components/ui/Button';
import { Icon } from '@/components/ui/Icon';
import { Link } from '@/components/ui/Link';
import { Mark } from '@/components/ui/Mark';
import { Text } from '@/components/ui/Text';
import { fontFamily, railRem, space, stroke, useTheme } from '@/components/ui/theme';

function RailLink({ item, isCurrent, onPress }: { item: RailItem; isCurrent: boolean; onPress?(): void }) {
  const { t } = useTranslation('common');
  const { colour, type, rem } = useTheme();
  const [isOver, setOver] = useState(false);
  const style: TextStyle = {
    ...type('body'),
    display: 'flex',
    flexDirection: 'row',
    alignItems: 'center',
    justifyContent: 'space-between',
    gap: space[2],
    minHeight: rem(2.75),
    paddingEnd: space[4],
    paddingStart: space[5] - stroke.bold,
    borderStartWidth: stroke.bold,
    borderColor: isCurrent ? colour.action : 'transparent',
    backgroundColor: isOver && !isCurrent ? colour.sunken : 'transparent',
    fontFamily,
    fontWeight: isCurrent ? '700' : '400',
    color: isCurrent || isOver ? colour.ink : colour.muted,
    textDecorationLine: 'none',
  };
  return (
    <RouterLink
      href={item.href}
      aria-current={isCurrent ? 'page' : undefined}
      onPress={onPress}
      onPointerEnter={() => setOver(true)}
      onPointerLeave={() => setOver(false)}
      style={style}
    >
      {t(`nav.${item.id}`)}
      {item.count === undefined ? null : (
        <Text size="fine" tone={isCurrent ? 'ink' : 'muted'} digits>
          {item.count}
        </Text>
      )}
    </RouterLink>
  );
}

function Places({ current, onPress }: { current?: RailId; onPress?(): void }) {
  const account = useShellAccount();
  return (
    <View role="list" style={{ gap: space.half }}>
      {(account.rail ?? []).map((item) => (
        <View key={item.id} role="listitem">
          <RailLink item={item} isCurrent={item.id === current} onPress={onPress} />
        </View>
      ))}
    </View>
  );
}

function Person() {
  const { t } = useTranslation('common');
  const account = useShellAccount();
  return (
    <View style={{ paddingHorizontal: space[5], gap: space[1] }}>
      {account.siteControl ??
        (account.siteName ? (
          <Text size="fine" tone="muted">
            {account.siteName}
          </Text>
        ) : null)}
      {account.personName ? (
        account.accountHref ? (
          <Link href={account.accountHref} size="fine" weight="bold" tone="ink" plain>
            {account.personName}
          </Link>
        ) : (
          <Text size="fine" weight="bold">
            {account.personName}
          </Text>
        )
      ) : null}
      {account.onSignOut ? (
        <Button kind="quiet" size="small" flush label={t('action.signOut')} onPress={account.onSignOut} />
      ) : null}
    </View>
  );
}

function Brand() {
  const { t } = useTranslation('common');
  return (
    <View style={{ flexDirection: 'row', alignItems: 'center', gap: space[3] }}>
      <Mark />
      <Text size="lead" weight="bold">
        {t('product')}
      </Text>
    </View>
  );
}

export function Rail({ current }: { current?: RailId }) {
  const { t } = useTranslation('common');
  const { colour, rem } = useTheme();
  return (
    <View
      role="banner"
      dataSet={{ print: 'no' }}
      style={{
        width: rem(railRem),
        flexShrink: 0,
        backgroundColor: colour.raised,
        borderEndWidth: stroke.hair,
        borderColor: colour.line,
      }}
    >
      <View dataSet={{ sticky: 'window' }} style={{ paddingTop: space[6], paddingBottom: space[5], gap: space[6] }}>
        <View style={{ paddingHorizontal: space[5] }}>
          <Brand />
        </View>
        <View role="navigation" aria-label={t('nav.main')} style={{ flexGrow: 1 }}>
          <Places current={current} />
        </View>
        <View role="group" aria-label={t('nav.account')}>
          <Person />
        </View>
      </View>
    </View>
  );
}

export function TopBar({ current }: { current?: RailId }) {
  const { t } = useTranslation('common');
  const { colour } = useTheme();
  const [isOpen, setOpen] = useState(false);
  return (
    <View
      role="banner"
      dataSet={{ print: 'no' }}
      style={{
        position: 'sticky',
        top: space[0],
        zIndex: 2,
        backgroundColor: colour.raised,
        borderBottomWidth: stroke.hair,
        borderColor: colour.line,
      }}
    >
      <View
        style={{
          flexDirection: 'row',
          alignItems: 'center',
          flexWrap: 'wrap',
          justifyContent: 'space-between',
          paddingHorizontal: space[4],
          paddingVertical: space[2],
        }}
      >
        <Brand />
        <Button
          kind="quiet"
          size="small"
          label={isOpen ? t('nav.closeMenu') : t('nav.menu')}
          icon={<Icon name={isOpen ? 'close' : 'menu'} tone="action" />}
          expanded={isOpen}
          controls="panel-menu"
          onPress={() => setOpen(!isOpen)}
        />
      </View>
      {isOpen ? (
        <View id="panel-menu" style={{ paddingBottom: space[4], gap: space[4] }}>
          <View role="navigation" aria-label={t('nav.main')}>
            <Places current={current} onPress={() => setOpen(false)} />
          </View>
          <View role="group" aria-label={t('nav.account')}>
            <Person />
          </View>
        </View>
      ) : null}
    </View>
  );
}
