/**
 * A real link: can be opened in a new tab and sent to a colleague. `ButtonLink` looks like a button and stays a link.
 * They must not do anything but lead somewhere.
 */
import { Link as RouterLink, type Href } from 'expo-router';
import { useState, type ReactNode } from 'react';
import { View, type TextStyle } from 'react-native';
import { fontFamily, radius, space, stroke, useTheme, type TextSize, type Tone } from '@/components/ui/theme';

export interface LinkProps {
  href: Href;
  children: ReactNode;
  size?: TextSize;
  weight?: 'regular' | 'bold';
  tone?: Extract<Tone, 'action' | 'ink' | 'muted' | 'stop'>;
  /** No line under it, where its place already says that it is a link (a table's first column, a rail). */
  plain?: boolean;
  /** Another document or site; opens beside this one. */
  external?: boolean;
  accessibleLabel?: string;
  replace?: boolean;
}

export function Link(props: LinkProps) {
  const { href, children, size, weight = 'bold', tone = 'action', plain, external, accessibleLabel, replace } = props;
  const theme = useTheme();
  const [isOver, setOver] = useState(false);
  const style: TextStyle = {
    ...(size ? theme.type(size) : theme.type('body')),
    fontFamily,
    fontWeight: weight === 'bold' ? '700' : '400',
    color: theme.colour[tone],
    textDecorationLine: plain && !isOver ? 'none' : 'underline',
  };
  return (
    <RouterLink
      href={href}
      replace={replace}
      target={external ? '_blank' : undefined}
      rel={external ? 'noopener noreferrer' : undefined}
      aria-label={accessibleLabel}
      onPointerEnter={() => setOver(true)}
      onPointerLeave={() => setOver(false)}
      style={style}
    >
      {children}
    </RouterLink>
  );
}

export interface ButtonLinkProps {
  href: Href;
  label: string;
  kind?: 'primary' | 'secondary' | 'quiet';
  size?: 'small' | 'regular' | 'large';
  grow?: boolean;
  reason?: string;
  accessibleLabel?: string;
}

export function ButtonLink({
  href,
  label,
  kind = 'primary',
  size = 'regular',
  grow,
  accessibleLabel,
}: ButtonLinkProps) {
  const theme = useTheme();
  const { colour } = theme;
  const [isOver, setOver] = useState(false);
  const isLarge = size === 'large' || (theme.density === 'reading' && size === 'regular');
  const height = size === 'large' ? theme.rem(3.5) : Math.max(theme.touch, theme.rem(isLarge ? 3.25 : 2.5));
  const step = theme.type(isLarge ? 'lead' : 'body');
  const isFilled = kind === 'primary';
  const style: TextStyle = {
    ...step,
    display: 'flex',
    alignItems: 'center',
    justifyContent: 'center',
    textAlign: 'center',
    textDecorationLine: 'none',
    fontFamily,
    fontWeight: '700',
    minHeight: height,
    paddingHorizontal: kind === 'quiet' || size === 'small' ? space[3] : space[5],
    paddingVertical: space[1],
    borderRadius: radius,
    borderWidth: stroke.firm,
    borderColor: kind === 'secondary' ? colour.action : 'transparent',
    backgroundColor: isFilled
      ? isOver
        ? colour.actionStrong
        : colour.action
      : isOver
        ? colour.actionTint
        : 'transparent',
    color: isFilled ? colour.onAction : colour.action,
  };
  return (
    <View style={grow ? { alignSelf: 'stretch' } : { alignSelf: 'flex-start' }}>
      <RouterLink
        href={href}
        aria-label={accessibleLabel}
        onPointerEnter={() => setOver(true)}
        onPointerLeave={() => setOver(false)}
        style={style}
      >
        {label}
      </RouterLink>
    </View>
  );
}
