/**
 * The three states that are not "full": on its way, nothing there, did not work. Each says what it is about and what can
 * be done. They must not show a spinner without words.
 */
import type { ReactNode } from 'react';
import { View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Button } from '@/components/ui/Button';
import { Icon } from '@/components/ui/Icon';
import { Text } from '@/components/ui/Text';
import { radius, space, stroke, useTheme } from '@/components/ui/theme';

export interface LoadingStateProps {
  /** What is on its way; "Loading" unless given. */
  label?: string;
  /** How many grey lines stand for what comes; 3 unless given. */
  lines?: number;
}

/** Widths of the grey lines, as shares of the column, so that they look like text and not like a table. */
const lineShares = ['72%', '94%', '58%', '86%', '66%'] as const;

export function LoadingState({ label, lines = 3 }: LoadingStateProps) {
  const { t } = useTranslation('common');
  const { colour, rem } = useTheme();
  return (
    <View role="status" aria-busy aria-live="polite" style={{ gap: space[3], paddingVertical: space[4] }}>
      <Text size="small" tone="muted">
        {label ?? t('state.loading')}
      </Text>
      {Array.from({ length: lines }, (_, index) => (
        <View
          key={index}
          style={{
            height: rem(1),
            width: lineShares[index % lineShares.length],
            borderRadius: radius / 2,
            backgroundColor: colour.sunken,
          }}
        />
      ))}
    </View>
  );
}

export interface EmptyStateProps {
  title: string;
  children?: ReactNode;
  action?: ReactNode;
}

export function EmptyState({ title, children, action }: EmptyStateProps) {
  const { colour } = useTheme();
  return (
    <View
      style={{
        gap: space[2],
        padding: space[6],
        alignItems: 'flex-start',
        borderRadius: radius,
        borderWidth: stroke.hair,
        borderStyle: 'dashed',
        borderColor: colour.muted,
      }}
    >
      <Text weight="bold" size="lead">
        {title}
      </Text>
      {typeof children === 'string' ? <Text tone="muted">{children}</Text> : children}
      {action ? <View style={{ paddingTop: space[2] }}>{action}</View> : null}
    </View>
  );
}

export interface FailedStateProps {
  title?: string;
  /** What is in the way and whether it passes by itself. */
  detail?: string;
  onRetry?(): void;
  retryLabel?: string;
  busy?: boolean;
  /** Who can help: a name and a phone number, or a link. */
  help?: ReactNode;
}

export function FailedState({ title, detail, onRetry, retryLabel, busy, help }: FailedStateProps) {
  const { t } = useTranslation('common');
  const { colour, rem } = useTheme();
  return (
    <View
      role="alert"
      style={{
        gap: space[2],
        padding: space[5],
        alignItems: 'flex-start',
        borderRadius: radius,
        borderWidth: stroke.hair,
        borderColor: colour.stop,
        backgroundColor: colour.raised,
      }}
    >
      <View style={{ flexDirection: 'row', gap: space[2], alignItems: 'center' }}>
        <Icon name="stop" tone="stop" size={rem(1)} />
        <Text size="fine" weight="bold" tone="stop">
          {t('state.failedWord')}
        </Text>
      </View>
      <Text weight="bold" size="lead">
        {title ?? t('state.failed')}
      </Text>
      <Text tone="muted">{detail ?? t('state.failedDetail')}</Text>
      {typeof help === 'string' ? <Text size="small">{help}</Text> : help}
      {onRetry ? (
        <View style={{ paddingTop: space[2] }}>
          <Button kind="secondary" label={retryLabel ?? t('action.retry')} onPress={onRetry} busy={busy} />
        </View>
      ) : null}
    </View>
  );
}
