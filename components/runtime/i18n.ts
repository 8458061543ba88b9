/**
 * The one i18next instance of the client: all namespaces of the language, loaded with the page. It must not hold words,
 * and must not fall back to a key that looks like a sentence: a missing word shows its key, so that a test finds it.
 */
import i18next from 'i18next';
import { initReactI18next } from 'react-i18next';
import { en } from '@/locales/en';

export const i18n = i18next.createInstance();

void i18n.use(initReactI18next).init({
  lng: 'en',
  fallbackLng: 'en',
  resources: { en },
  ns: Object.keys(en),
  defaultNS: 'common',
  // React escapes what it shows.
  interpolation: { escapeValue: false },
  returnNull: false,
  // Resources are here already; the first render must have its words.
  initAsync: false,
});
