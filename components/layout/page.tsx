/**
 * What every page does, whatever its shell: its name in the browser's tab, the focus on its heading when the address
 * changed, a way past the navigation. It must not draw anything of its own but that.
 */
import { usePathname } from 'expo-router';
import { useEffect, useRef } from 'react';
import type { Text as NativeText } from 'react-native';
import { useTranslation } from 'react-i18next';
import { PageAnchor } from '@/components/ui/page-controls';
import { Text } from '@/components/ui/Text';
import type { TextSize } from '@/components/ui/theme';

export const mainId = 'main';

/** The address shown last. On the very first page the browser's own order of reading is right and nothing is moved. */
let shownPath: string | null = null;

export function SkipLink() {
  const { t } = useTranslation('common');
  return <PageAnchor targetId={mainId}>{t('nav.skip')}</PageAnchor>;
}

export interface PageTitleProps {
  children: string;
  size?: TextSize;
  /** Pages that change without a new address (the steps of a check) give what changes. */
  step?: string | number;
}

/** The page's one heading of level 1. */
export function PageTitle({ children, size, step }: PageTitleProps) {
  const { t } = useTranslation('common');
  const pathname = usePathname();
  const heading = useRef<NativeText>(null);
  const place = step === undefined ? pathname : `${pathname}#${step}`;
  const product = t('product');

  useEffect(() => {
    if (typeof document !== 'undefined') document.title = `${children} · ${product}`;
  }, [children, product]);

  useEffect(() => {
    if (shownPath !== null && shownPath !== place) {
      heading.current?.focus();
      if (typeof window !== 'undefined') window.scrollTo({ top: 0 });
    }
    shownPath = place;
  }, [place]);

  return (
    <Text heading={1} size={size} tabIndex={-1} ref={heading}>
      {children}
    </Text>
  );
}
