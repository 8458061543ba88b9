/**
 * What stands round every screen: reads and writes, words, theme, toasts. It holds the settings that this browser keeps
 * (theme, text size), which name nobody.
 */
import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { Slot } from 'expo-router';
import { useEffect, useState } from 'react';
import { I18nextProvider } from 'react-i18next';
import { SafeAreaProvider } from 'react-native-safe-area-context';
import { i18n } from '@/components/runtime/i18n';
import { ApiProblem } from '@/components/runtime/api';
import { keepPages } from '@/components/runtime/offline';
import { keepSettings, keptSettings } from '@/components/runtime/settings';
import { ThemeProvider } from '@/components/ui/theme';
import { ToastProvider } from '@/components/ui/Toast';

/** Shown at once from the cache, asked again when older; a refusal is not asked again, a lost network is. */
const freshMs = 10_000;
const keptMs = 30 * 60_000;
const tries = 2;

export function Root() {
  const [queries] = useState(
    () =>
      new QueryClient({
        defaultOptions: {
          queries: {
            // Asked whatever the browser thinks of the network: no answer is an answer that a page can show.
            networkMode: 'always',
            staleTime: freshMs,
            gcTime: keptMs,
            retry: (count, error) =>
              error instanceof ApiProblem && (error.offline || error.problem.status >= 500) && count < tries,
          },
          mutations: { retry: false, networkMode: 'always' },
        },
      }),
  );
  const [settings] = useState(keptSettings);
  useEffect(() => void keepPages(), []);
  return (
    <QueryClientProvider client={queries}>
      <I18nextProvider i18n={i18n}>
        <SafeAreaProvider>
          <ThemeProvider initialMode={settings.mode} initialTextScale={settings.textScale} onChange={keepSettings}>
            <ToastProvider>
              <Slot />
            </ToastProvider>
          </ThemeProvider>
        </SafeAreaProvider>
      </I18nextProvider>
    </QueryClientProvider>
  );
}
