/**
 * A real form around fields: Enter sends it, the browser's own bubbles stay away. It must not check anything.
 */
import type { ReactNode } from 'react';
import { View } from 'react-native';
import { space } from '@/components/ui/theme';

export interface FormProps {
  onSubmit(): void;
  children: ReactNode;
  /** Names the form for screen readers where a page has several. */
  label?: string;
  gap?: keyof typeof space;
}

export function Form({ onSubmit, children, label, gap = 5 }: FormProps) {
  return (
    <form
      noValidate
      aria-label={label}
      onSubmit={(event) => {
        event.preventDefault();
        event.stopPropagation();
        onSubmit();
      }}
    >
      <View style={{ gap: space[gap] }}>{children}</View>
      {/* Enter in a field presses the form's first sending button; ours are drawn by Button and press by themselves. */}
      <button type="submit" hidden tabIndex={-1} aria-hidden />
    </form>
  );
}
