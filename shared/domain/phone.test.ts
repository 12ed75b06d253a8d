import { describe, expect, it } from 'vitest';
import { formatPhone, parsePhone } from './phone';

describe('parsePhone', () => {
  it.each([
    '(303) 555-0142',
    '303-555-0142',
    '1-303-555-0142',
    '3035550142',
    '+1 303 555 0142',
    ' 303.555.0142 ',
  ])('reads %s', (typed) => {
    expect(parsePhone(typed)).toBe('+13035550142');
  });

  // Examples of libphonenumber's own documentation and metadata.
  it.each([
    ['(213) 373-4253', '+12133734253'],
    ['+1 201 555 0123', '+12015550123'],
    ['+1 506 234 5678', '+15062345678'],
  ])('reads the documented example %s', (typed, e164) => {
    expect(parsePhone(typed)).toBe(e164);
  });

  it.each([
    ['a toll-free number', '800-555-0199'],
    ['a premium number', '900-555-0142'],
    ['an area code that begins with 1', '123-456-7890'],
    ['an exchange that begins with 0', '303-055-0142'],
    ['a number without its area code', '555-0142'],
    ['an emergency number', '911'],
    ['three digits', '123'],
    ['one digit too many', '+1 303 555 01423'],
    ['more digits than E.164 has', '+12345678901234567'],
    ['a number abroad', '+44 20 7946 0958'],
    ['a mobile abroad', '+522221234567'],
    ['nothing', ''],
    ['a word', 'call me'],
  ])('refuses %s', (_name, typed) => {
    expect(parsePhone(typed)).toBeNull();
  });
});

describe('formatPhone', () => {
  it('writes a number as at home, and what it cannot read as it stands', () => {
    expect(formatPhone('+13035550142')).toBe('(303) 555-0142');
    expect(formatPhone('nonsense')).toBe('nonsense');
  });

  it('is read back to the same number', () => {
    expect(parsePhone(formatPhone('+13035550199'))).toBe('+13035550199');
  });
});
