import { describe, expect, it } from 'vitest';
import type { z } from 'zod';
import {
  cents,
  code,
  email,
  instant,
  line,
  optionalEmail,
  optionalLine,
  optionalText,
  phone,
  text,
} from './fields';

const takes = (schema: z.ZodType, value: unknown) => schema.safeParse(value).success;
const messages = (schema: z.ZodType, value: unknown) =>
  schema.safeParse(value).error?.issues.map((issue) => issue.message);

describe('a line of text', () => {
  it('is trimmed, required and of limited length', () => {
    expect(line(5).parse('  Dana ')).toBe('Dana');
    expect(messages(line(5), '   ')).toEqual(['errors.field.required']);
    expect(messages(line(5), 'x'.repeat(6))).toEqual(['errors.field.too_long']);
    expect(takes(line(5), 'x'.repeat(5))).toBe(true);
  });

  it('holds letters of any language and no control character', () => {
    expect(takes(line(60), 'Teo Marín Ñandú 水 😀')).toBe(true);
    for (const wrong of ['a\r\nBcc: b@example.com', 'a\nb', 'a\tb', 'a\u0000b', 'a\u0085b', 'a\u007fb']) {
      expect(messages(line(60), wrong), JSON.stringify(wrong)).toEqual(['errors.field.characters']);
      expect(takes(optionalLine(60), wrong)).toBe(false);
    }
  });

  it('is blank when a reader sees nothing', () => {
    // Zero width space, soft hyphen, byte order mark, Hangul filler, braille blank: Unicode 15, chapters 6, 18 and 23.
    for (const unseen of ['\u200b', '\u00ad\u2060', '\ufeff', '\u3164', '\u2800', '\u202e']) {
      expect(messages(line(60), unseen), JSON.stringify(unseen)).toEqual(['errors.field.required']);
      expect(messages(text(60), unseen)).toEqual(['errors.field.required']);
      expect(optionalLine(60).parse(unseen)).toBe('');
      expect(optionalText(60).parse(unseen)).toBe('');
    }
  });

  it('reads as it was typed: without the marks that turn text around, and on one line', () => {
    expect(line(60).parse('\u202ePike\u202c Decks')).toBe('Pike Decks');
    expect(optionalText(60).parse('a\u2067b\u2069')).toBe('ab');
    for (const broken of ['a\u2028b', 'a\u2029b']) expect(takes(line(60), broken)).toBe(false);
    expect(line(60).parse('👩\u200d🔧 Ada')).toBe('👩\u200d🔧 Ada');
  });

  it('holds no half of a surrogate pair', () => {
    for (const wrong of ['a\ud83d', '\ude00b', '\ude00\ud83d']) {
      expect(takes(line(60), wrong)).toBe(false);
      expect(takes(optionalText(60), wrong)).toBe(false);
    }
  });
});

describe('several lines', () => {
  it('keep line breaks and tabs and take no other control character', () => {
    expect(optionalText(60).parse(' one\r\n\ttwo\n\nthree ')).toBe('one\r\n\ttwo\n\nthree');
    for (const wrong of ['a\u0000b', 'a\n\u0007', '\u001b[2J']) expect(takes(text(60), wrong)).toBe(false);
  });

  it('may be blank only where that is allowed', () => {
    expect(optionalText(60).parse(undefined)).toBe('');
    expect(messages(text(60), '\n \n')).toEqual(['errors.field.required']);
  });

  it('are checked fast however long', () => {
    const started = performance.now();
    expect(takes(optionalText(200_000), `${'a\n'.repeat(99_999)}\u0000`)).toBe(false);
    expect(takes(optionalText(200_000), `${'\u00ad '.repeat(99_000)}x`)).toBe(true);
    expect(performance.now() - started).toBeLessThan(1000);
  });
});

describe('reachable by', () => {
  it('a phone, given on as E.164', () => {
    expect(phone.parse('(303) 555-0142')).toBe('+13035550142');
    expect(messages(phone, '12')).toEqual(['errors.field.phone']);
    expect(messages(phone, ' ')).toContain('errors.field.required');
  });

  it('an address in small letters', () => {
    expect(email.parse(' Dana@Example.COM ')).toBe('dana@example.com');
    for (const wrong of ['dana', 'dana@', 'a b@example.com', 'dana@example.com\nBcc: x@example.com']) {
      expect(takes(email, wrong), wrong).toBe(false);
    }
    expect(takes(email, `${'a'.repeat(250)}@example.com`)).toBe(false);
  });

  it('no address, where it may be left out', () => {
    expect([optionalEmail.parse(''), optionalEmail.parse(undefined)]).toEqual(['', '']);
  });
});

describe('a code', () => {
  it('is read as people type it, and refused with one wrong symbol', () => {
    const right = [...'23456789ABCDEFGHJKLMNPQRSTUVWXYZ'].filter((check) => takes(code, `ABCDF${check}`));
    expect(right).toHaveLength(1);
    expect(code.parse(` abc-df${right[0]?.toLowerCase()} `)).toBe(`ABCDF${right[0]}`);
    expect(messages(code, 'ABC-DF')).toEqual(['errors.field.code']);
  });
});

describe('sums and instants', () => {
  it('are whole minor units within reason', () => {
    expect([0, 100_000_000].map((sum) => takes(cents, sum))).toEqual([true, true]);
    for (const wrong of [-1, 0.5, 100_000_001, NaN, Infinity, '5']) expect(takes(cents, wrong)).toBe(false);
  });

  it('are ISO 8601 with an offset', () => {
    expect(takes(instant, '2026-12-03T09:00:00-07:00')).toBe(true);
    expect(takes(instant, '2026-12-03T16:00:00.000Z')).toBe(true);
    for (const wrong of ['2026-12-03', '2026-12-03T09:00:00', 'tomorrow', '2026-02-30T09:00:00Z']) {
      expect(messages(instant, wrong), wrong).toEqual(['errors.field.time']);
    }
  });
});
