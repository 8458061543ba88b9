/**
 * What is pressed. One look a kind, at least 48 px high where a participant reads; says in words why it cannot be
 * pressed. It must not ask for confirmation: a dialog does that, and Stop never has one.
 */
import { useId, type ReactNode, type Ref } from 'react';
import { Pressable, View, type ViewStyle } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Text } from '@/components/ui/Text';
import { radius, space, stroke, useTheme, type Colours, type TextSize, type Tone } from '@/components/ui/theme';

/** `stop` ends a session and is filled; `danger` removes something and is outlined until it is meant. */
export type ButtonKind = 'primary' | 'secondary' | 'plain' | 'quiet' | 'stop' | 'danger';

export interface ButtonProps {
  label: string;
  onPress?(): void;
  kind?: ButtonKind;
  /** `small` for rows of a table, `large` for the one main thing and for Stop. */
  size?: 'small' | 'regular' | 'large';
  /** Full width of what it stands in. */
  grow?: boolean;
  /** Something is on its way: it cannot be pressed again and says so. */
  busy?: boolean;
  busyLabel?: string;
  disabled?: boolean;
  /** Why it is disabled, or what happens when it is pressed; shown under it and read with it. */
  reason?: string;
  icon?: ReactNode;
  /** A quiet button whose word stands on the line of the text above it. */
  flush?: boolean;
  /** For screen readers, where the label alone would not tell which of many it is. Must begin with the label. */
  accessibleLabel?: string;
  expanded?: boolean;
  controls?: string;
  hasPopup?: 'menu' | 'dialog';
  testID?: string;
  ref?: Ref<View>;
}

interface Paint {
  ground: string;
  over: string;
  edge: string;
  word: Tone;
}

function paintOf(kind: ButtonKind, colour: Colours): Paint {
  switch (kind) {
    case 'primary':
      return { ground: colour.action, over: colour.actionStrong, edge: 'transparent', word: 'onAction' };
    case 'stop':
      return { ground: colour.stop, over: colour.stopStrong, edge: 'transparent', word: 'onStop' };
    case 'secondary':
      return { ground: 'transparent', over: colour.actionTint, edge: colour.action, word: 'action' };
    case 'plain':
      return { ground: 'transparent', over: colour.sunken, edge: colour.muted, word: 'ink' };
    case 'danger':
      return { ground: 'transparent', over: colour.stopTint, edge: colour.stop, word: 'stop' };
    case 'quiet':
      return { ground: 'transparent', over: colour.actionTint, edge: 'transparent', word: 'action' };
  }
}

export function Button(props: ButtonProps) {
  const {
    label,
    onPress,
    kind = 'primary',
    size = 'regular',
    grow,
    busy,
    busyLabel,
    disabled,
    reason,
    icon,
    flush,
  } = props;
  const { t } = useTranslation('common');
  const theme = useTheme();
  const reasonId = useId();
  const isOff = Boolean(disabled || busy);
  const paint = paintOf(kind, theme.colour);
  const isLarge = size === 'large' || (theme.density === 'reading' && size === 'regular');
  const isMarginal = kind === 'quiet' || size === 'small';
  const minHeight = size === 'large' ? theme.rem(3.5) : Math.max(theme.touch, theme.rem(isLarge ? 3.25 : 2.5));
  const textSize: TextSize = kind === 'stop' && size === 'large' ? 'title' : isLarge ? 'lead' : 'body';

  const shape = (isOver: boolean): ViewStyle => ({
    minHeight,
    paddingHorizontal: isMarginal ? space[3] : space[5],
    paddingVertical: space[1],
    borderRadius: radius,
    borderWidth: stroke.firm,
    borderColor: isOff ? theme.colour.line : paint.edge,
    backgroundColor: isOff ? theme.colour.sunken : isOver ? paint.over : paint.ground,
    flexDirection: 'row',
    alignItems: 'center',
    justifyContent: 'center',
    gap: space[2],
    // A long word breaks into a second line before it leaves the page.
    ...(grow ? { alignSelf: 'stretch' } : { maxWidth: '100%' }),
  });
  // Moved, not pulled by a margin: that would be taken off the room that the label has.
  const outset: ViewStyle = flush ? { insetInlineStart: -(space[3] + stroke.firm) } : {};

  return (
    <View
      style={[
        grow ? { alignSelf: 'stretch', gap: space[2] } : { gap: space[1], alignItems: 'flex-start', maxWidth: '100%' },
        outset,
      ]}
    >
      <Pressable
        ref={props.ref}
        role="button"
        aria-label={props.accessibleLabel}
        aria-busy={busy}
        aria-describedby={reason ? reasonId : undefined}
        aria-expanded={props.expanded}
        aria-controls={props.controls}
        aria-haspopup={props.hasPopup}
        disabled={isOff}
        onPress={onPress}
        testID={props.testID}
        style={({ hovered, pressed }) => shape(hovered || pressed)}
      >
        {icon}
        <View style={{ flexShrink: 1, minWidth: 0 }}>
          <Text size={textSize} weight="bold" tone={isOff ? 'muted' : paint.word} align="center">
            {busy ? (busyLabel ?? t('busy')) : label}
          </Text>
        </View>
      </Pressable>
      {reason ? (
        <Text id={reasonId} size="small" tone="muted" align={grow ? 'center' : 'start'}>
          {reason}
        </Text>
      ) : null}
    </View>
  );
}
