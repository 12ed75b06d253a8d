import { parsePhoneNumberFromString } from 'libphonenumber-js/max';

/** Countries whose numbers a shop may text without further set-up. */
const COUNTRIES = ['US', 'CA', 'PR'];

/**
 * Reads a phone number as typed (US by default) to E.164.
 * @returns the number, or null where it cannot be one that we text: too short, too long, not assigned in form,
 * abroad, toll-free or premium
 */
export function parsePhone(typed: string): string | null {
  const number = parsePhoneNumberFromString(typed, 'US');
  if (!number?.isValid() || !number.country || !COUNTRIES.includes(number.country)) return null;
  const type = number.getType();
  return type === 'FIXED_LINE_OR_MOBILE' || type === 'MOBILE' ? number.number : null;
}

/** As people write it at home: `(303) 555-0142`. Anything unreadable is shown as it stands. */
export function formatPhone(e164: string): string {
  return parsePhoneNumberFromString(e164)?.formatNational() ?? e164;
}
