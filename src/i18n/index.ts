import { createI18n } from 'vue-i18n';
import { LANGUAGES, type Language } from '#shared/domain/when';

const STORED = 'benchbell.language';
const loaders = { en: () => import('./en'), es: () => import('./es') };
const loaded = new Set<Language>();

export const i18n = createI18n({ legacy: false, locale: 'en', fallbackLocale: 'en', fallbackWarn: false });

/** Whether a string names a language that we have words in. */
export function isLanguage(value: unknown): value is Language {
  return LANGUAGES.some((language) => language === value);
}

/**
 * The language chosen on this device, else the signed-in person's own, else the browser's, else English.
 */
export function preferredLanguage(ofPerson?: Language): Language {
  const chosen = localStorage.getItem(STORED);
  if (isLanguage(chosen)) return chosen;
  if (ofPerson) return ofPerson;
  const spoken = navigator.languages.map((tag) => tag.slice(0, 2));
  return spoken.find(isLanguage) ?? 'en';
}

/** The language on screen. */
export function currentLanguage(): Language {
  return i18n.global.locale.value as Language;
}

/** Fetches a language's words if need be and shows the page in it. */
export async function setLanguage(language: Language): Promise<void> {
  if (!loaded.has(language)) {
    const { messages } = await loaders[language]();
    i18n.global.setLocaleMessage(language, messages as never);
    loaded.add(language);
  }
  i18n.global.locale.value = language;
  document.documentElement.lang = language;
}

/** The reader chose a language: show it and keep it for the next visit. */
export async function chooseLanguage(language: Language): Promise<void> {
  localStorage.setItem(STORED, language);
  await setLanguage(language);
}

/** Translates outside of components. */
export const t = i18n.global.t;
