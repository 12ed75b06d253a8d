import { describe, expect, it } from 'vitest';
import { LANGUAGES } from './domain/when';

interface Words {
  [key: string]: string | Words;
}

const files = import.meta.glob<Words>('./locales/*/*.json', { eager: true, import: 'default' });
const areasOf = (language: string) =>
  Object.keys(files)
    .filter((path) => path.startsWith(`./locales/${language}/`))
    .map((path) => path.slice(path.lastIndexOf('/') + 1))
    .sort();
const areas = areasOf('en');
const read = (language: string, area: string) => files[`./locales/${language}/${area}`] ?? {};

function flat(words: Words, path = ''): [string, string][] {
  return Object.entries(words).flatMap(([key, value]) => {
    const here = path ? `${path}.${key}` : key;
    return typeof value === 'string' ? [[here, value] as [string, string]] : flat(value, here);
  });
}
const messages = (language: string, area: string) => new Map(flat(read(language, area)));

/** What vue-i18n leaves as it stands, `{'@'}`, says nothing about places and plurals. */
const bare = (message: string) => message.replace(/\{'[^']*'\}/g, '');
const places = (message: string) => [...new Set(bare(message).match(/\{[^}]*\}/g) ?? [])].sort();
const plurals = (message: string) => bare(message).split('|');

it('has the same areas in every language', () => {
  expect(areas).toContain('notices.json');
  for (const language of LANGUAGES) expect(areasOf(language)).toEqual(areas);
});

it('has each key in one area alone, since the areas are read into one', () => {
  const tops = areas.flatMap((area) => Object.keys(read('en', area)));
  expect(tops.filter((key, index) => tops.indexOf(key) !== index)).toEqual([]);
});

describe.each(areas)('the words of %s', (area) => {
  const en = messages('en', area);
  const es = messages('es', area);

  it('are there in both languages, in the same order', () => {
    expect([...es.keys()]).toEqual([...en.keys()]);
  });

  it('are never blank, and have no double space', () => {
    for (const [key, message] of [...en, ...es]) {
      expect(message.trim(), key).not.toBe('');
      expect(message, key).not.toMatch(/ {2}/);
    }
  });

  it('have the same places', () => {
    for (const [key, message] of en) expect(places(es.get(key) ?? ''), key).toEqual(places(message));
  });

  // Both languages part one from many and nothing else; where the two read alike, one form says both.
  it('have one or two plural forms, none of them blank', () => {
    for (const [key, message] of [...en, ...es]) {
      const forms = plurals(message);
      expect(forms.length, key).toBeLessThanOrEqual(2);
      expect(
        forms.every((form) => form.trim() !== ''),
        key,
      ).toBe(true);
    }
  });

  it('are messages that vue-i18n takes literally: no bare @, no odd brace', () => {
    for (const [key, message] of [...en, ...es]) {
      expect(bare(message), key).not.toContain('@');
      expect(bare(message).replace(/\{[A-Za-z]\w*\}/g, ''), key).not.toMatch(/[{}]/);
    }
  });
});
