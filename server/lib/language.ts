import type { Request } from 'express';
import { LANGUAGES, type Language } from '#shared/domain/when';

/** The language a request asks for: the first of ours that it accepts, else English. */
export function languageOf(req: Request): Language {
  const accepted = req.acceptsLanguages([...LANGUAGES]);
  return LANGUAGES.find((language) => language === accepted) ?? 'en';
}
