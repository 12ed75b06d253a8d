/**
 * Tag and stub codes: five drawn characters and a check character by ISO 7064 MOD 37-2, so that one wrong
 * symbol or two swapped ones never name another job. Written in an alphabet without look-alikes (no 0, O, 1, I);
 * a code whose check character falls outside it is drawn again.
 */

/** The alphabet that ISO 7064 computes over; position is value, `*` is 36. */
const ISO_ALPHABET = '0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZ*';
/** The alphabet that codes are written in. */
export const CODE_ALPHABET = '23456789ABCDEFGHJKLMNPQRSTUVWXYZ';
const DRAWN = 5;

/**
 * The ISO 7064 MOD 37-2 check character of a string over 0-9 A-Z.
 * @throws RangeError when a character is outside that alphabet
 */
export function checkCharacter(payload: string): string {
  let sum = 0;
  for (const symbol of payload) {
    const value = ISO_ALPHABET.indexOf(symbol);
    if (value < 0 || value > 35) throw new RangeError(`not in the code alphabet: ${symbol}`);
    sum = ((sum + value) * 2) % 37;
  }
  return ISO_ALPHABET.charAt((38 - sum) % 37);
}

/**
 * Draws a code.
 * @param pick returns a whole number in [0, n); the caller brings the random source
 */
export function drawCode(pick: (n: number) => number): string {
  for (;;) {
    const payload = Array.from({ length: DRAWN }, () =>
      CODE_ALPHABET.charAt(pick(CODE_ALPHABET.length)),
    ).join('');
    const check = checkCharacter(payload);
    if (CODE_ALPHABET.includes(check)) return payload + check;
  }
}

/** What a person typed, without hyphens and spaces, in capitals. */
export function normalizeCode(typed: string): string {
  return typed.toUpperCase().replace(/[\s\-–—]/g, '');
}

/** Whether a normalized code is well-formed and its check character fits. */
export function isCode(code: string): boolean {
  if (code.length !== DRAWN + 1) return false;
  if (![...code].every((symbol) => CODE_ALPHABET.includes(symbol))) return false;
  return checkCharacter(code.slice(0, DRAWN)) === code.charAt(DRAWN);
}

/** As printed and shown: two groups of three. */
export function formatCode(code: string): string {
  return `${code.slice(0, 3)}-${code.slice(3)}`;
}
