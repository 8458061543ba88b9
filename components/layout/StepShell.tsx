/**
 * One question or step a page: back, where one is, how far along, and the one button that goes on. It must not forget
 * an answer when one goes back: the screen keeps them.
 */
import type { ReactNode } from 'react';
import { Pressable, View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Column } from '@/components/layout/Column';
import { PageTitle, SkipLink } from '@/components/layout/page';
import { useShellAccount } from '@/components/layout/shell-account';
import { Icon } from '@/components/ui/Icon';
import { Progress } from '@/components/ui/Progress';
import { Text } from '@/components/ui/Text';
import { DensityProvider, radius, space, useTheme } from '@/components/ui/theme';

export interface StepShellProps {
  /** The question, or what to do; the page's heading. */
  title: string;
  /** A line or two under it. */
  lead?: string;
  step: {
    value: number;
    max: number;
    /** In place of "Question 3 of 9", e.g. "Set-up, 2 of 3". */
    label?: string;
    kind?: 'question' | 'step';
  };
  /** Left out on the first step when nothing lies before it. */
  onBack?(): void;
  backLabel?: string;
  children?: ReactNode;
  footer?: ReactNode;
  banner?: ReactNode;
}

function StepPage({ title, lead, step, onBack, backLabel, children, footer, banner }: StepShellProps) {
  const { t } = useTranslation('common');
  const { colour, touch } = useTheme();
  const account = useShellAccount();
  const place = step.label ?? t(`step.${step.kind ?? 'question'}`, { value: step.value, max: step.max });
  return (
    <View style={{ flexGrow: 1, backgroundColor: colour.surface }}>
      <SkipLink />
      {banner ?? account.banner}
      <Column
        foot={footer}
        head={
          <View style={{ gap: space[2] }}>
            <View
              style={{
                flexDirection: 'row',
                alignItems: 'center',
                justifyContent: 'space-between',
                gap: space[3],
                minHeight: touch,
              }}
            >
              {onBack ? (
                <Pressable
                  role="button"
                  onPress={onBack}
                  style={{
                    flexDirection: 'row',
                    alignItems: 'center',
                    gap: space[1],
                    minHeight: touch,
                    paddingEnd: space[4],
                    borderRadius: radius,
                  }}
                >
                  <Icon name="back" tone="action" />
                  <Text weight="bold" tone="action">
                    {backLabel ?? t('action.back')}
                  </Text>
                </Pressable>
              ) : (
                <View />
              )}
              <Text size="small" tone="muted" digits>
                {place}
              </Text>
            </View>
            <Progress value={step.value} max={step.max} label={place} hideText />
          </View>
        }
      >
        <View style={{ gap: space[3], paddingBottom: space[2] }}>
          <PageTitle step={title}>{title}</PageTitle>
          {lead ? <Text tone="muted">{lead}</Text> : null}
        </View>
        {children}
      </Column>
    </View>
  );
}

export function StepShell(props: StepShellProps) {
  return (
    <DensityProvider density="reading">
      <StepPage {...props} />
    </DensityProvider>
  );
}
