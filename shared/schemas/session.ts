/** Sign-in, sessions, one-time codes and passwords. */
import { z } from 'zod';
import { email, language, phone, uuid } from './fields';
import type { Role } from '#shared/domain/roles';
import type { Language } from '#shared/domain/when';
import type { Ability } from '#shared/policies/abilities';

export const PASSWORD_MIN = 15;
export const PASSWORD_MAX = 128;

/** Asks for a code by text. The answer is the same for known and unknown phones. */
export const AskCodeBody = z.strictObject({
  phone,
  purpose: z.enum(['book', 'sign_in']),
  language,
  /** Booking: whether the box about texts was ticked when the code was asked for. */
  consent: z.boolean().default(false),
});
export type AskCodeBody = z.infer<typeof AskCodeBody>;
export interface AskCodeAnswer {
  /** Names this request; a code is good only with it. */
  requestId: string;
  expiresAt: string;
}

/** Details of the error `opted_out`: how to undo the STOP, and how to do without texts. */
export interface OptedOutDetails {
  /** E.164. */
  shopPhone: string;
  /** The number to text START to, E.164; null while the shop has none. */
  shopNumberToText: string | null;
}

export const sixDigits = z
  .string()
  .transform((typed) => typed.replace(/\s/g, ''))
  .pipe(z.string().regex(/^\d{6}$/, 'errors.field.six_digits'));

/** Signs a customer in by the code. Where several people share the phone, `personId` says which. */
export const CodeSignInBody = z.strictObject({ requestId: uuid, code: sixDigits, personId: uuid.optional() });
export type CodeSignInBody = z.infer<typeof CodeSignInBody>;

/** Details of the error `which_person`: the people who share the verified phone. */
export interface WhichPersonDetails {
  people: { id: string; name: string; account: string }[];
}

export const PasswordSignInBody = z.strictObject({
  email,
  password: z.string().min(1, 'errors.field.required').max(PASSWORD_MAX, 'errors.field.too_long'),
});
export type PasswordSignInBody = z.infer<typeof PasswordSignInBody>;

/** Sets a password by a one-time link. Common passwords are refused by the server under `errors.field.password_common`. */
export const SetPasswordBody = z.strictObject({
  password: z
    .string()
    .min(PASSWORD_MIN, 'errors.field.password_short')
    .max(PASSWORD_MAX, 'errors.field.too_long'),
});
export type SetPasswordBody = z.infer<typeof SetPasswordBody>;
export interface PasswordLinkView {
  name: string;
  email: string;
  expiresAt: string;
}

/** GET /api/session. `person` is null for a visitor. */
export interface SessionView {
  /** The server's clock: what the client calls "now". */
  now: string;
  person: null | {
    id: string;
    name: string;
    roles: Role[];
    language: Language;
    /** In E.164, the person's own. */
    phone: string | null;
    email: string | null;
    /** Of a customer: whether texts to that phone are agreed to and not stopped. */
    textsOn: boolean;
    account: { id: string; name: string } | null;
    shop: { slug: string; name: string; zone: string; phone: string };
    abilities: Ability[];
  };
}
