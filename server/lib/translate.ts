/**
 * The catalogues on the server: notices, answers to texts and errors are said in the reader's language, from the
 * same files and by the same message format as the screens.
 */
import { readdirSync, readFileSync } from 'node:fs';
import { createI18n } from 'vue-i18n';
import { LANGUAGES, type Language } from '#shared/domain/when';

interface Words {
  [key: string]: string | Words;
}
export type Params = Record<string, string | number>;

/** A language's areas: each file begins with the keys of its own. */
function readCatalogue(language: Language): Words {
  const folder = new URL(`../../shared/locales/${language}/`, import.meta.url);
  const files = readdirSync(folder).filter((name) => name.endsWith('.json'));
  const areas = files.map((name) => JSON.parse(readFileSync(new URL(name, folder), 'utf8')) as Words);
  return Object.assign({}, ...areas) as Words;
}

const i18n = createI18n({
  legacy: false,
  locale: 'en',
  missingWarn: false,
  fallbackWarn: false,
  messages: Object.fromEntries(LANGUAGES.map((language) => [language, readCatalogue(language)])),
});
const { global } = i18n;

/** Whether the catalogues of that language have the key. */
function hasWords(language: Language, key: string): boolean {
  return global.te(key, language);
}

/**
 * Says `key` in a language.
 * @param params values for the places in the message; `n` also chooses between "one | many"
 * @throws Error when the catalogue lacks the key: a person must never read a key
 */
export function translate(language: Language, key: string, params: Params = {}): string {
  if (!hasWords(language, key)) throw new Error(`no words for ${key} in ${language}`);
  const options = { locale: language };
  return typeof params.n === 'number'
    ? global.t(key, params, { ...options, plural: params.n })
    : global.t(key, params, options);
}
