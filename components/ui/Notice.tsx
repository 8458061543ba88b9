/**
 * Something to read before going on: shape, word, title, what to do. It must not carry the only copy of a refusal's
 * reasons as colour, and must not go away by itself.
 */
import type { ReactNode } from 'react';
import { View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Icon, type IconName } from '@/components/ui/Icon';
import { Text } from '@/components/ui/Text';
import { radius, space, stroke, useTheme, type Colours, type Tone } from '@/components/ui/theme';

export type NoticeTone = 'caution' | 'stop' | 'steady' | 'info';

export interface NoticeProps {
  tone?: NoticeTone;
  title: string;
  /** The word beside the shape; the tone's own word unless given. */
  word?: string;
  children?: ReactNode;
  /** Buttons or links, under the text. */
  actions?: ReactNode;
  /** Read out when it appears: `polite` for what can wait, `assertive` for what cannot. */
  announce?: 'polite' | 'assertive';
  headingLevel?: 2 | 3;
}

function paintOf(tone: NoticeTone, colour: Colours): { ground: string; edge: string; word: Tone; shape: IconName } {
  switch (tone) {
    case 'caution':
      return { ground: colour.cautionTint, edge: colour.cautionFill, word: 'caution', shape: 'caution' };
    case 'stop':
      return { ground: colour.stopTint, edge: colour.stop, word: 'stop', shape: 'stop' };
    case 'steady':
      return { ground: colour.steadyTint, edge: colour.steady, word: 'steady', shape: 'steady' };
    case 'info':
      return { ground: colour.raised, edge: colour.line, word: 'action', shape: 'info' };
  }
}

export function Notice({ tone = 'info', title, word, children, actions, announce, headingLevel }: NoticeProps) {
  const { t } = useTranslation('common');
  const { colour, rem } = useTheme();
  const paint = paintOf(tone, colour);
  return (
    <View
      role={announce === 'assertive' ? 'alert' : announce === 'polite' ? 'status' : undefined}
      style={{
        gap: space[1],
        padding: space[4],
        borderRadius: radius,
        borderWidth: stroke.hair,
        borderColor: paint.edge,
        backgroundColor: paint.ground,
      }}
    >
      <View style={{ flexDirection: 'row', alignItems: 'center', gap: space[2] }}>
        <Icon name={paint.shape} tone={paint.word} size={rem(1)} />
        <Text size="fine" weight="bold" tone={paint.word}>
          {word ?? t(`tone.${tone}`)}
        </Text>
      </View>
      <Text weight="bold" size="body" heading={headingLevel}>
        {title}
      </Text>
      {typeof children === 'string' ? <Text size="small">{children}</Text> : children}
      {actions ? (
        <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[3], paddingTop: space[2] }}>{actions}</View>
      ) : null}
    </View>
  );
}
