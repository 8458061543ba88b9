// How this browser likes its pages: theme and text size. Kept in local storage; it names nobody and nothing medical.

import { z } from 'zod';

const place = 'rampwell.settings';

const Settings = z.object({
  mode: z.enum(['system', 'light', 'dark']).catch('system'),
  textScale: z.number().min(0.8).max(2).catch(1),
});
export type Settings = z.infer<typeof Settings>;

/** What was kept, or the defaults where nothing was, or storage is closed. */
export function keptSettings(): Settings {
  try {
    return Settings.parse(JSON.parse(localStorage.getItem(place) ?? '{}'));
  } catch {
    return Settings.parse({});
  }
}

/** Keeps the settings; a browser that forbids it just forgets them. */
export function keepSettings(settings: Settings): void {
  try {
    localStorage.setItem(place, JSON.stringify(settings));
  } catch {
    // Private windows may forbid storage: the settings then last as long as the page.
  }
}
