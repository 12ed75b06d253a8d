/**
 * Text length as 3GPP TS 23.038 counts it: GSM-7 septets where every character allows, else UCS-2 units.
 * The editor and the sender use these same functions.
 */
const GSM_BASIC =
  '@£$¥èéùìòÇ\nØø\rÅåΔ_ΦΓΛΩΠΨΣΘΞÆæßÉ !"#¤%&\'()*+,-./0123456789:;<=>?¡ABCDEFGHIJKLMNOPQRSTUVWXYZÄÖÑÜ§¿abcdefghijklmnopqrstuvwxyzäöñüà';
const GSM_EXTENDED = '^{}\\[~]|€\f';

/** Characters that a plain one replaces without loss of meaning; left alone, each would halve the room and more. */
const PLAIN: Record<string, string> = {
  '\u2018': "'",
  '\u2019': "'",
  '\u201a': "'",
  '\u201c': '"',
  '\u201d': '"',
  '\u201e': '"',
  '\u2013': '-',
  '\u2014': '-',
  '\u2011': '-',
  '\u2026': '...',
  '\u00a0': ' ',
  '\u202f': ' ',
  '\u2009': ' ',
  '\t': ' ',
  '\u00b4': "'",
  '`': "'",
  '\u2022': '-',
  '\u00ab': '"',
  '\u00bb': '"',
  '\u200b': '',
};

export interface TextLength {
  encoding: 'GSM-7' | 'UCS-2';
  /** Septets or UTF-16 units, as the encoding has it. */
  units: number;
  /** At least 1: an empty text is charged as one. */
  segments: number;
}

/** Replaces what forces the longer alphabet by its plain equal; words and accents stay as they are. */
export function plainText(text: string): string {
  return [...text].map((character) => PLAIN[character] ?? character).join('');
}

/** Counts a text as the network will. */
export function textLength(text: string): TextLength {
  const septets = gsmSeptets(text);
  if (septets !== null) {
    return { encoding: 'GSM-7', units: septets, segments: segments(text, septets, 160, 153, septetsOf) };
  }
  return {
    encoding: 'UCS-2',
    units: text.length,
    segments: segments(text, text.length, 70, 67, (c) => c.length),
  };
}

function septetsOf(character: string): number {
  return GSM_EXTENDED.includes(character) ? 2 : 1;
}

function gsmSeptets(text: string): number | null {
  let septets = 0;
  for (const character of text) {
    if (GSM_BASIC.includes(character)) septets += 1;
    else if (GSM_EXTENDED.includes(character)) septets += 2;
    else return null;
  }
  return septets;
}

/** A character of two units is never split over two segments, so the last unit of a segment may stay empty. */
function segments(
  text: string,
  total: number,
  single: number,
  part: number,
  size: (c: string) => number,
): number {
  if (total <= single) return 1;
  let count = 1;
  let used = 0;
  for (const character of text) {
    if (used + size(character) > part) {
      count += 1;
      used = 0;
    }
    used += size(character);
  }
  return count;
}
