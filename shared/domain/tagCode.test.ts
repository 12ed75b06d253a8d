import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkCharacter, CODE_ALPHABET, drawCode, formatCode, isCode, normalizeCode } from './tagCode';

const CODES = 2000;
/** Repeatable draws that cover the alphabet evenly: a multiplicative generator (Park and Miller's constants). */
const generator = (seed: number) => {
  let state = seed;
  return (n: number) => {
    state = (state * 48271) % 2147483647;
    return state % n;
  };
};
const pick = generator(20261201);
const codes = Array.from({ length: CODES }, () => drawCode(pick));

const swapped = (code: string, at: number) =>
  code.slice(0, at) + code.charAt(at + 1) + code.charAt(at) + code.slice(at + 2);

describe('the check character', () => {
  // ISO 7064 MOD 37-2: UK blood services, Red Book, annex 2 (donation number G1234 98 654321 has the check character H).
  it('is the published one', () => {
    expect(checkCharacter('G123498654321')).toBe('H');
  });

  // Result of the public implementation cdigit 5.0.1.
  it('is what another implementation computes', () => {
    expect(checkCharacter('A999914123456')).toBe('N');
  });

  it('makes the weighted sum one modulo 37, as ISO 7064 defines it', () => {
    const values = '0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZ*';
    fc.assert(
      fc.property(fc.stringMatching(/^[0-9A-Z]{1,30}$/), (payload) => {
        const symbols = [...(payload + checkCharacter(payload))].reverse();
        const sum = symbols.reduce((total, symbol, index) => {
          return total + BigInt(values.indexOf(symbol)) * 2n ** BigInt(index);
        }, 0n);
        expect(sum % 37n).toBe(1n);
      }),
    );
  });

  it('is for nothing outside the alphabet', () => {
    for (const wrong of ['a', '*', '-', ' ', 'É']) {
      expect(() => checkCharacter(`AB${wrong}`)).toThrow(RangeError);
    }
  });
});

describe('drawn codes', () => {
  it('are six characters without look-alikes and are read back', () => {
    for (const code of codes) {
      expect(code).toMatch(/^[2-9A-HJ-NP-Z]{6}$/);
      expect(isCode(code)).toBe(true);
    }
    expect(CODE_ALPHABET).toHaveLength(32);
  });

  it('use the whole alphabet', () => {
    expect(new Set(codes.join('')).size).toBe(32);
  });

  it('differ from every code with one wrong symbol', () => {
    const misread = codes.flatMap((code) =>
      [...code].flatMap((own, at) =>
        [...CODE_ALPHABET]
          .filter((other) => other !== own)
          .map((other) => code.slice(0, at) + other + code.slice(at + 1)),
      ),
    );
    expect(misread).toHaveLength(CODES * 6 * 31);
    expect(misread.filter(isCode)).toEqual([]);
  });

  it('differ from every code with two neighbours swapped', () => {
    const misread = codes.flatMap((code) =>
      [0, 1, 2, 3, 4].filter((at) => code[at] !== code[at + 1]).map((at) => swapped(code, at)),
    );
    expect(misread.length).toBeGreaterThan(CODES * 4);
    expect(misread.filter(isCode)).toEqual([]);
  });

  // 5 of the 37 check characters are not written (0, 1, I, O, *).
  it('are drawn again about once in seven', () => {
    let drawn = 0;
    const counting = generator(7);
    for (let n = 0; n < 20_000; n += 1) {
      drawCode((size) => {
        drawn += 1;
        return counting(size);
      });
    }
    const again = 1 - 20_000 / (drawn / 5);
    expect(again).toBeGreaterThan(5 / 37 - 0.01);
    expect(again).toBeLessThan(5 / 37 + 0.01);
  });
});

describe('a typed code', () => {
  const [code = ''] = codes;

  it('may be in small letters, with spaces and any dash', () => {
    const [a, b] = [code.slice(0, 3).toLowerCase(), code.slice(3)];
    for (const typed of [`${a}-${b}`, ` ${a} ${b} `, `${a}–${b}`, `${a}—${b}`, a + b]) {
      expect(normalizeCode(typed)).toBe(code);
    }
  });

  it('is shown in two groups of three, and read again from that', () => {
    expect(formatCode('7K4QM2')).toBe('7K4-QM2');
    expect(normalizeCode(formatCode(code))).toBe(code);
  });

  it('is no code when too short, too long, empty or with a look-alike', () => {
    const wrong = ['', code.slice(0, 5), `${code}2`, `0${code.slice(1)}`, `${code.slice(0, 5)}O`];
    for (const typed of wrong) expect(isCode(typed), typed).toBe(false);
  });
});
