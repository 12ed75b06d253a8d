/**
 * Refuses passwords that many people use. At 15 characters the published lists of common passwords hold almost
 * nothing but the same few words, rows of keys and digits, put together or repeated; so instead of a list, what is
 * common is taken away, and what is left must still be something.
 */

/** Words that people build passwords of, and whole phrases that long-password advice made famous (from memory). */
const COMMON_PARTS = [
  'correcthorsebatterystaple',
  'thequickbrownfoxjumpsoverthelazydog',
  'tobeornottobe',
  'maytheforcebewithyou',
  'mypasswordis',
  'thisismypassword',
  'ihatepasswords',
  'letmein',
  'password',
  'passwort',
  'contrasena',
  'passphrase',
  'passcode',
  'secret',
  'welcome',
  'iloveyou',
  'tequiero',
  'changeme',
  'default',
  'administrator',
  'admin',
  'master',
  'login',
  'guest',
  'monkey',
  'dragon',
  'football',
  'baseball',
  'basketball',
  'superman',
  'batman',
  'starwars',
  'pokemon',
  'sunshine',
  'princess',
  'princesa',
  'butterfly',
  'mariposa',
  'chocolate',
  'liverpool',
  'trustno1',
  'whatever',
  'freedom',
  'america',
  'computer',
  'internet',
  'summer',
  'winter',
  'spring',
  'autumn',
  'verano',
  'invierno',
  'january',
  'february',
  'september',
  'october',
  'november',
  'december',
  'monday',
  'friday',
  'compressor',
  'benchbell',
];
/** Rows of keys, the alphabet and the digits; a piece of four or more in either direction is no secret. */
const ROWS = [
  'abcdefghijklmnopqrstuvwxyz',
  '01234567890',
  'qwertyuiop',
  'asdfghjkl',
  'zxcvbnm',
  '1qaz2wsx3edc4rfv5tgb6yhn7ujm8ik9ol0p',
];
const ROW_PIECE = 4;
/** Characters that must be left, and how many different ones. */
const LEFT_MIN = 8;
const DIFFERENT_MIN = 5;

const LOOK_ALIKE: Record<string, string> = {
  '@': 'a',
  '4': 'a',
  '3': 'e',
  '1': 'i',
  '!': 'i',
  '0': 'o',
  $: 's',
  '5': 's',
  '7': 't',
};

/**
 * Whether the password is one that many people would choose, or that follows from who and where the person is.
 * @param known the shop's name, the person's name and address
 */
export function isCommonPassword(password: string, known: readonly string[]): boolean {
  const plain = fold(password);
  const spelled = plain.replace(/[^a-z]/g, (symbol) => LOOK_ALIKE[symbol] ?? symbol);
  const parts = [...known.flatMap(piecesOf), ...COMMON_PARTS].sort((a, b) => b.length - a.length);
  return [plain, spelled].some((form) => !isSomething(without(form.replace(/[\s\-_.,]/g, ''), parts)));
}

function fold(text: string): string {
  return text.toLowerCase().normalize('NFD').replace(/\p{M}/gu, '');
}

/** A name in its words and as one, an address in its parts; very short ones say nothing. */
function piecesOf(text: string): string[] {
  const words = fold(text).split(/[^a-z0-9]+/);
  return [words.join(''), ...words].filter((word) => word.length >= 3);
}

function without(text: string, parts: readonly string[]): string {
  const left = parts.reduce((rest, part) => rest.replaceAll(part, ' '), text);
  return withoutRows(left).replace(/ /g, '');
}

function withoutRows(text: string): string {
  const rows = [...ROWS, ...ROWS.map((row) => [...row].reverse().join(''))];
  let left = text;
  for (let at = 0; at + ROW_PIECE <= left.length; at += 1) {
    const length = longestRow(left.slice(at), rows);
    if (length >= ROW_PIECE) left = `${left.slice(0, at)} ${left.slice(at + length)}`;
  }
  return left;
}

function longestRow(text: string, rows: readonly string[]): number {
  let length = 0;
  while (length < text.length && rows.some((row) => row.includes(text.slice(0, length + 1)))) length += 1;
  return length;
}

/** Long enough, of enough different characters, and not one short piece over and over. */
function isSomething(left: string): boolean {
  const unit = /^(.+?)\1*$/.exec(left)?.[1] ?? '';
  return unit.length >= LEFT_MIN && new Set(left).size >= DIFFERENT_MIN;
}
