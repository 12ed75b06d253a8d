import fc from 'fast-check';
import { SegmentedMessage } from 'sms-segments-calculator';
import { describe, expect, it } from 'vitest';
import { plainText, textLength } from './textLength';

// The basic alphabet of 3GPP TS 23.038 (table 6.2.1) by code point, without the escape; and its extension table.
const BASIC = [
  0x40, 0xa3, 0x24, 0xa5, 0xe8, 0xe9, 0xf9, 0xec, 0xf2, 0xc7, 0x0a, 0xd8, 0xf8, 0x0d, 0xc5, 0xe5, 0x394, 0x5f,
  0x3a6, 0x393, 0x39b, 0x3a9, 0x3a0, 0x3a8, 0x3a3, 0x398, 0x39e, 0xc6, 0xe6, 0xdf, 0xc9, 0xa4, 0xa1, 0xc4,
  0xd6, 0xd1, 0xdc, 0xa7, 0xbf, 0xe4, 0xf6, 0xf1, 0xfc, 0xe0,
].map((point) => String.fromCodePoint(point));
const ASCII = ` !"#%&'()*+,-./0123456789:;<=>?ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz`;
const ALPHABET = [...BASIC, ...ASCII];
const EXTENSION = [...'^{}\\[~]|€', '\f'];

const short = (text: string) => {
  const { encoding, units, segments } = textLength(text);
  return [encoding, units, segments];
};

describe('textLength', () => {
  it('knows all of the 127 characters of the standard’s basic table, each as one septet', () => {
    expect(new Set(ALPHABET).size).toBe(127);
    for (const character of ALPHABET) expect(short(character), character).toEqual(['GSM-7', 1, 1]);
  });

  it('counts the extension table as two septets', () => {
    for (const character of EXTENSION) expect(short(character), character).toEqual(['GSM-7', 2, 1]);
  });

  it('takes no other character of Unicode’s first plane for GSM-7', () => {
    const known = new Set([...ALPHABET, ...EXTENSION]);
    const wrong: string[] = [];
    for (let point = 0; point < 0x10000; point += 1) {
      const character = String.fromCodePoint(point);
      if ((textLength(character).encoding === 'GSM-7') !== known.has(character)) {
        wrong.push(point.toString(16));
      }
    }
    expect(wrong).toEqual([]);
  });

  const sha = '\u0448';
  const grin = '\u{1F600}';
  const family = '\u{1F468}\u200d\u{1F469}\u200d\u{1F467}\u200d\u{1F466}';
  // As sms-segments-calculator 1.3.0 counts them; the limits 160/153 and 70/67 are TS 23.038's with a 6-octet header.
  it.each([
    ['nothing', '', 'GSM-7', 0, 1],
    ['two words', 'Hello World', 'GSM-7', 11, 1],
    ['160 letters', 'a'.repeat(160), 'GSM-7', 160, 1],
    ['161 letters', 'a'.repeat(161), 'GSM-7', 161, 2],
    ['306 letters', 'a'.repeat(306), 'GSM-7', 306, 2],
    ['307 letters', 'a'.repeat(307), 'GSM-7', 307, 3],
    ['459 letters', 'a'.repeat(459), 'GSM-7', 459, 3],
    ['460 letters', 'a'.repeat(460), 'GSM-7', 460, 4],
    ['80 euro signs', '€'.repeat(80), 'GSM-7', 160, 1],
    ['81 euro signs', '€'.repeat(81), 'GSM-7', 162, 2],
    ['158 letters and a euro sign', `${'a'.repeat(158)}€`, 'GSM-7', 160, 1],
    ['159 letters and a euro sign', `${'a'.repeat(159)}€`, 'GSM-7', 161, 2],
    ['the nine printed extensions', '^{}\\[~]|€', 'GSM-7', 18, 1],
    ['70 Cyrillic letters', sha.repeat(70), 'UCS-2', 70, 1],
    ['71 Cyrillic letters', sha.repeat(71), 'UCS-2', 71, 2],
    ['134 Cyrillic letters', sha.repeat(134), 'UCS-2', 134, 2],
    ['135 Cyrillic letters', sha.repeat(135), 'UCS-2', 135, 3],
    ['35 faces', grin.repeat(35), 'UCS-2', 70, 1],
    ['36 faces', grin.repeat(36), 'UCS-2', 72, 2],
    ['69 letters and a face', `${'a'.repeat(69)}${grin}`, 'UCS-2', 71, 2],
    ['a family of four', family, 'UCS-2', 11, 1],
    ['a line break of Windows', '\r\n', 'GSM-7', 2, 1],
  ])('counts %s', (_name, text, encoding, units, segments) => {
    expect(short(text)).toEqual([encoding, units, segments]);
  });

  it('never splits an extension over two segments', () => {
    expect(textLength(`${'a'.repeat(152)}€${'a'.repeat(152)}`)).toMatchObject({ units: 306, segments: 3 });
  });

  const agrees = (text: string) => {
    const other = new SegmentedMessage(text, 'auto');
    const { encoding, segments } = textLength(text);
    expect([encoding, segments]).toEqual([other.encodingName, other.segmentsCount]);
  };
  const upTo = (unit: fc.Arbitrary<string>) => fc.string({ unit, maxLength: 500, size: 'max' });

  it('agrees with the library on whatever GSM-7 writes', () => {
    // The library leaves the form feed out of its table; the standard has it.
    const unit = fc.constantFrom(...ALPHABET, ...EXTENSION.filter((character) => character !== '\f'));
    fc.assert(fc.property(upTo(unit), agrees), { numRuns: 500 });
  });

  it('agrees with the library on mixed text and faces', () => {
    const unit = fc.constantFrom('a', 'ñ', 'á', 'ш', '€', '°', '½', '’', grin, '水');
    fc.assert(fc.property(upTo(unit), agrees), { numRuns: 500 });
  });
});

describe('plainText', () => {
  // The first-segment room shrinks from 160 to 70 for one curly apostrophe.
  it('turns typographer’s signs into plain ones, and so back into GSM-7', () => {
    const text = 'It’s ready – “No. 14”… tomorrow\u00a0at 9:00\u202fam';
    expect(textLength(text).encoding).toBe('UCS-2');
    expect(plainText(text)).toBe(`It's ready - "No. 14"... tomorrow at 9:00 am`);
    expect(textLength(plainText(text)).encoding).toBe('GSM-7');
  });

  it('leaves words, accents and faces as they are', () => {
    const text = `Está lista la compactadora, señor Marín: 32 °F ½ ${'\u{1F600}'}`;
    expect(plainText(text)).toBe(text);
  });

  it('is done after once', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'grapheme' }), (text) => plainText(plainText(text)) === plainText(text)),
    );
  });
});
