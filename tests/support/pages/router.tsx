// What: expo-router for one page on its own: links are links, and where a page wants to go is written down.
// Must not: go anywhere.
import type { ReactNode } from 'react';

export const went: string[] = [];
export let params: Record<string, string> = {};
export function arriveWith(next: Record<string, string>): void {
  params = next;
  went.length = 0;
}

const router = {
  push: (href: string) => went.push(href),
  replace: (href: string) => went.push(href),
  back: () => went.push('back'),
};
export const useRouter = () => router;
export const usePathname = () => '/here';
export const useSegments = () => [];
export const useLocalSearchParams = () => params;

export function Redirect({ href }: { href: string }) {
  went.push(href);
  return null;
}

export function Link({ href, children, ...rest }: { href: string; children: ReactNode; 'aria-label'?: string }) {
  return (
    <a href={href} aria-label={rest['aria-label']}>
      {children}
    </a>
  );
}
