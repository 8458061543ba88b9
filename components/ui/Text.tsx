/**
 * All text people read: one of seven sizes, two weights, a tone by role, and a real heading where one is meant.
 * It must not be given a colour or a size of its own.
 */
import { createContext, use, type ReactNode, type Ref } from 'react';
import { Text as NativeText, type TextProps as NativeTextProps, type TextStyle } from 'react-native';
import { fontFamily, useTheme, type TextSize, type Tone } from '@/components/ui/theme';

export interface TextProps extends Omit<NativeTextProps, 'style' | 'role'> {
  children?: ReactNode;
  size?: TextSize;
  weight?: 'regular' | 'bold';
  tone?: Tone;
  /** A real heading of this level. Size and weight follow the level unless given. */
  heading?: 1 | 2 | 3;
  /** Digits of one width, for numbers that stand under each other or count. */
  digits?: boolean;
  align?: 'start' | 'center' | 'end';
  italic?: boolean;
  strike?: boolean;
  /** Takes the room that is left in a row, and may shrink. */
  grow?: boolean;
  role?: NativeTextProps['role'];
  ref?: Ref<NativeText>;
}

const headingSize: Record<1 | 2 | 3, TextSize> = { 1: 'display', 2: 'title', 3: 'lead' };

// The page knows 'end'; React Native's own list of values lacks it, and 'right' would not turn with the language.
const alignedToEnd: TextStyle = Object.assign<TextStyle, object>({}, { textAlign: 'end' });

/** Text inside text takes what it is not given from the text around it. */
const InsideText = createContext(false);

export function Text(props: TextProps) {
  const { children, size, weight, tone, heading, digits, align, italic, strike, grow, role, ...rest } = props;
  const theme = useTheme();
  const isInside = use(InsideText);
  const step = size ?? (heading ? headingSize[heading] : isInside ? undefined : 'body');
  const bold = weight ?? (heading ? 'bold' : isInside ? undefined : 'regular');
  const style: TextStyle = {
    ...(step ? theme.type(step) : {}),
    ...(isInside ? {} : { fontFamily }),
    ...(bold ? { fontWeight: bold === 'bold' ? '700' : '400' } : {}),
    ...(tone || !isInside ? { color: theme.colour[tone ?? 'ink'] } : {}),
    ...(align === 'center' ? { textAlign: 'center' } : {}),
    ...(align === 'end' ? alignedToEnd : {}),
    ...(italic ? { fontStyle: 'italic' } : {}),
    ...(strike ? { textDecorationLine: 'line-through' } : {}),
    ...(digits ? { fontVariant: ['tabular-nums'] } : {}),
    ...(grow ? { flexGrow: 1, flexShrink: 1, flexBasis: 0, minWidth: 0 } : {}),
  };
  return (
    <InsideText value>
      <NativeText {...rest} role={heading ? 'heading' : role} aria-level={heading ?? rest['aria-level']} style={style}>
        {children}
      </NativeText>
    </InsideText>
  );
}
