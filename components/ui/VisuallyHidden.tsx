/**
 * Text for screen readers only. It must not hold anything that can take the focus, for nobody would see where it is.
 */
import type { ReactNode } from 'react';
import { View, type ViewStyle } from 'react-native';
import { Text, type TextProps } from '@/components/ui/Text';

// One pixel, cut off, taken out of the flow: the usual way to keep text readable to assistive technology alone.
const outOfSight: ViewStyle = { position: 'absolute', width: 1, height: 1, overflow: 'hidden', clip: 'rect(0 0 0 0)' };

export interface VisuallyHiddenProps {
  children: ReactNode;
  id?: string;
  heading?: TextProps['heading'];
  /** Holds more than text: a table, a list. */
  block?: boolean;
}

export function VisuallyHidden({ children, id, heading, block }: VisuallyHiddenProps) {
  return (
    <View style={outOfSight}>
      {block ? (
        children
      ) : (
        <Text id={id} heading={heading}>
          {children}
        </Text>
      )}
    </View>
  );
}
