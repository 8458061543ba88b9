/**
 * Properties that react-native-web passes to the page and React Native's own types do not know: relations between
 * elements, keys, direction. It must add nothing that changes what a property of React Native means.
 */
/// <reference types="expo/types" />
import type { KeyboardEvent, PointerEvent } from 'react';

interface WebRelations {
  'aria-activedescendant'?: string;
  'aria-atomic'?: boolean;
  'aria-autocomplete'?: 'none' | 'inline' | 'list' | 'both';
  'aria-colcount'?: number;
  'aria-controls'?: string;
  'aria-current'?: 'page' | 'step' | 'date' | 'time' | 'true';
  'aria-describedby'?: string;
  'aria-errormessage'?: string;
  'aria-haspopup'?: 'menu' | 'listbox' | 'dialog';
  'aria-invalid'?: boolean;
  'aria-keyshortcuts'?: string;
  'aria-level'?: number;
  'aria-multiselectable'?: boolean;
  'aria-orientation'?: 'horizontal' | 'vertical';
  'aria-owns'?: string;
  'aria-pressed'?: boolean;
  'aria-required'?: boolean;
  'aria-roledescription'?: string;
  'aria-rowcount'?: number;
  'aria-sort'?: 'ascending' | 'descending' | 'none';
  dataSet?: Record<string, string>;
  dir?: 'ltr' | 'rtl' | 'auto';
  onKeyDown?: (event: KeyboardEvent) => void;
  onPointerEnter?: (event: PointerEvent) => void;
  onPointerLeave?: (event: PointerEvent) => void;
}

declare module 'react-native' {
  interface ViewProps extends WebRelations {
    lang?: string;
  }
  interface TextProps extends WebRelations {
    'aria-hidden'?: boolean;
    href?: string;
    hrefAttrs?: { target?: string; rel?: string; download?: boolean };
  }
  interface PressableProps extends WebRelations {
    href?: string;
  }
  interface TextInputProps {
    name?: string;
  }
  interface PressableStateCallbackType {
    readonly focused: boolean;
  }
}
