import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { root } from '../../../scripts/lib/harness.mjs';

export type Language = 'en' | 'es';
interface Catalogue {
  [key: string]: string | Catalogue;
}

function catalogue(language: Language, area: string): Catalogue {
  const path = join(root, 'shared', 'locales', language, `${area}.json`);
  return JSON.parse(readFileSync(path, 'utf8')) as Catalogue;
}

/** What stands at a key of the catalogues, such as `book.next_who`, in the reader's language. */
export function words(language: Language, key: string): string {
  const [area = ''] = key.split('.');
  let found: string | Catalogue | undefined = catalogue(language, area);
  for (const part of key.split('.')) found = typeof found === 'string' ? undefined : found?.[part];
  if (typeof found !== 'string') throw new Error(`no words at ${key} in ${language}`);
  return unescaped(found);
}

/** The catalogues' own writing of a character that would mean something in them. */
const unescaped = (text: string): string => text.replace(/\{'(.)'\}/g, '$1');

/** Areas that customers read. */
const AREAS = ['book', 'common', 'errors', 'signin', 'stub', 'welcome', 'stages', 'machines'];

function* sentences(of: string | Catalogue): Generator<string> {
  if (typeof of === 'string') yield unescaped(of);
  else for (const part of Object.values(of)) yield* sentences(part);
}

/** What is said to customers in this language and in no other: a reader of another language must not meet it. */
export function onlyIn(language: Language): Set<string> {
  const other = language === 'en' ? 'es' : 'en';
  const all = (of: Language) => AREAS.flatMap((area) => [...sentences(catalogue(of, area))]);
  const shared = new Set(all(other));
  return new Set(all(language).filter((text) => text.length > 3 && !shared.has(text)));
}
