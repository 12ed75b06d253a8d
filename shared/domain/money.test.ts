import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { formatCents, parseCents } from './money';

describe('parseCents', () => {
  it.each([
    ['236.40', 23_640],
    ['$1,200', 120_000],
    ['$1,234,567.89', 123_456_789],
    [' 12 ', 1_200],
    ['12.5', 1_250],
    ['0', 0],
    ['0.07', 7],
    // Binary fractions would make 1.15 * 100 and 8.70 * 100 miss.
    ['1.15', 115],
    ['8.70', 870],
    ['9999999.99', 999_999_999],
  ])('reads %s', (typed, cents) => {
    expect(parseCents(typed)).toBe(cents);
  });

  it.each([
    '',
    '$',
    '-5',
    '1.234',
    '1,20',
    '1,2345',
    '12,50',
    '.50',
    '5.',
    '1e3',
    '12a',
    '1 200',
    '10000000',
    '٣',
  ])('refuses "%s"', (typed) => {
    expect(parseCents(typed)).toBeNull();
  });
});

describe('formatCents', () => {
  it.each([
    [0, '$0.00'],
    [7, '$0.07'],
    [23_640, '$236.40'],
    [123_456_789, '$1,234,567.89'],
  ])('writes %i in both languages', (cents, words) => {
    expect(formatCents(cents)).toBe(words);
    expect(formatCents(cents, 'es')).toBe(words);
  });

  it('is read back to the same sum', () => {
    const sums = fc.integer({ min: 0, max: 999_999_999 });
    fc.assert(fc.property(sums, (cents) => parseCents(formatCents(cents)) === cents));
  });
});
