/**
 * A place whose text is read out when it changes. It must be on the page before the text is, or nothing is read.
 */
import type { ReactNode } from 'react';
import { View } from 'react-native';
import { VisuallyHidden } from '@/components/ui/VisuallyHidden';

export interface LiveProps {
  children?: ReactNode;
  /** Interrupts what is being read: only for what cannot wait. */
  urgent?: boolean;
  /** For screen readers only, where the eye sees it elsewhere. */
  hidden?: boolean;
}

export function Live({ children, urgent, hidden }: LiveProps) {
  return (
    <View role={urgent ? 'alert' : 'status'} aria-live={urgent ? 'assertive' : 'polite'} aria-atomic>
      {hidden && children ? <VisuallyHidden>{children}</VisuallyHidden> : children}
    </View>
  );
}
