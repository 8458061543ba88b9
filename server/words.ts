// The sentences that the server itself sends: problems, reasons, mails. Words come from locales/ alone; none is written here.

import i18next from 'i18next';
import clearance from '@/locales/en/clearance.json';
import errors from '@/locales/en/errors.json';
import mail from '@/locales/en/mail.json';

const words = i18next.createInstance();

void words.init({
  lng: 'en',
  fallbackLng: 'en',
  resources: { en: { clearance, errors, mail } },
  ns: ['clearance', 'errors', 'mail'],
  // Texts go into JSON and into mails, which escape for themselves.
  interpolation: { escapeValue: false },
  // A fact that is not there leaves a gap, never a placeholder in somebody's mail.
  missingInterpolationHandler: () => '',
  initAsync: false,
});

export type Facts = Readonly<Record<string, string | number | boolean | null | undefined>>;

export function hasWords(key: string): boolean {
  return words.exists(key);
}

/** The sentence of a key such as `errors:code.not_found` in a language, or in English where that language lacks it. */
export function sentence(key: string, facts: Facts = {}, language = 'en'): string {
  return words.t(key, { ...facts, lng: language });
}

/** A list of paragraphs. */
export function paragraphs(key: string, facts: Facts = {}, language = 'en'): string[] {
  const found: unknown = words.t(key, { ...facts, lng: language, returnObjects: true });
  return Array.isArray(found) ? found.map(String) : [];
}

/** `Tuesday 12 May, 16:00` as a person in that zone reads it. */
export function momentInWords(instant: string, zone: string, language = 'en'): string {
  const moment = new Date(instant);
  // British order, as the demo's sites are; the zone decides the hour, not the order.
  const locale = language === 'en' ? 'en-GB' : language;
  return new Intl.DateTimeFormat(locale, {
    timeZone: zone,
    weekday: 'long',
    day: 'numeric',
    month: 'long',
    hour: '2-digit',
    minute: '2-digit',
  }).format(moment);
}
