/** Fields that several forms share. Messages are keys of the catalogues (`errors.*`), never sentences. */
import { z } from 'zod';
import { isCode, normalizeCode } from '#shared/domain/tagCode';
import { parsePhone } from '#shared/domain/phone';
import { LANGUAGES } from '#shared/domain/when';

export const uuid = z.uuid('errors.field.uuid');
export const language = z.enum(LANGUAGES);

/**
 * Control characters have no place in one line of text, and line breaks could end up in a mail header. Half of a
 * surrogate pair is no character at all, and the database's JSON refuses it.
 */
const oneLine = /^[^\p{Cc}\p{Cs}\p{Zl}\p{Zp}]*$/u;
/** Text areas keep line breaks and tabs; the database takes no zero byte. */
const manyLines = /^[^\p{Cc}\p{Cs}]*(?:[\n\r\t][^\p{Cc}\p{Cs}]*)*$/u;

/** Marks that turn the direction of text around: with them a name reads as another than it is. */
const TURNING = /[\u202a-\u202e\u2066-\u2069]/g;
/** Nothing that a reader sees: spaces, format characters, and the letters that are drawn as nothing. */
const UNSEEN = /^[\s\p{Z}\p{Cf}\p{Default_Ignorable_Code_Point}\u2800]*$/u;

/**
 * What was typed, trimmed. Turning marks come along unseen when somebody pastes, so they are dropped and not
 * complained of; what shows nothing is blank.
 */
function seen(typed: string): string {
  const plain = typed.replace(TURNING, '');
  return UNSEEN.test(plain) ? '' : plain.trim();
}

/** A required line of text, trimmed, of at most `max` characters. */
export function line(max: number) {
  return z
    .string()
    .overwrite(seen)
    .min(1, 'errors.field.required')
    .max(max, 'errors.field.too_long')
    .regex(oneLine, 'errors.field.characters');
}

/** A line that may be left blank; blank is the empty string. */
export function optionalLine(max: number) {
  return z
    .string()
    .overwrite(seen)
    .max(max, 'errors.field.too_long')
    .regex(oneLine, 'errors.field.characters')
    .default('');
}

/** Several lines that may be left blank. */
export function optionalText(max: number) {
  return z
    .string()
    .overwrite(seen)
    .max(max, 'errors.field.too_long')
    .regex(manyLines, 'errors.field.characters')
    .default('');
}

/** Several lines, required. */
export function text(max: number) {
  return z
    .string()
    .overwrite(seen)
    .min(1, 'errors.field.required')
    .max(max, 'errors.field.too_long')
    .regex(manyLines, 'errors.field.characters');
}

/** A phone as typed, given on as E.164. */
export const phone = z
  .string()
  .trim()
  .min(1, 'errors.field.required')
  .max(40, 'errors.field.phone')
  .transform((typed, ctx) => {
    const number = parsePhone(typed);
    if (number) return number;
    ctx.addIssue({ code: 'custom', message: 'errors.field.phone' });
    return z.NEVER;
  });

/** An e-mail address in lower case. */
export const email = z
  .string()
  .trim()
  .toLowerCase()
  .max(254, 'errors.field.too_long')
  .pipe(z.email('errors.field.email'));
/** The same, or blank. */
export const optionalEmail = z.union([z.literal(''), email]).default('');

/** A tag or stub code as typed, given on normalized. */
export const code = z
  .string()
  .trim()
  .max(20, 'errors.field.code')
  .transform(normalizeCode)
  .refine(isCode, 'errors.field.code');

/** Minor units of money. */
export const cents = z
  .number()
  .int('errors.field.sum')
  .min(0, 'errors.field.sum')
  .max(100_000_000, 'errors.field.sum');

/** An instant as ISO 8601 with its offset. */
export const instant = z.iso.datetime({ offset: true, error: 'errors.field.time' });
