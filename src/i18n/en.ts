import { mergeAreas, type Areas } from './mergeAreas';

/** The app's words in English, as one chunk that is fetched only for its readers. The stub and the server carry their own. */
export const messages = mergeAreas(
  import.meta.glob<Areas>(
    ['../../shared/locales/en/*.json', '!../../shared/locales/en/{stub,notices}.json'],
    { eager: true, import: 'default' },
  ),
);
