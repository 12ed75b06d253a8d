import { describe, expect, it } from 'vitest';
import {
  AskCodeBody,
  PASSWORD_MAX,
  PASSWORD_MIN,
  PasswordSignInBody,
  SetPasswordBody,
  sixDigits,
} from './session';

describe('a code as typed', () => {
  it('may have spaces, and is six plain digits', () => {
    expect(sixDigits.parse(' 123 456 ')).toBe('123456');
    for (const wrong of ['12345', '1234567', '12345a', '١٢٣٤٥٦', '-12345', '']) {
      expect(sixDigits.safeParse(wrong).success, wrong).toBe(false);
    }
  });
});

describe('asking for a code', () => {
  it('takes no consent that was not given', () => {
    const asked = { phone: '(303) 555-0118', purpose: 'book', language: 'es' };
    expect(AskCodeBody.parse(asked)).toMatchObject({ phone: '+13035550118', consent: false });
    expect(AskCodeBody.safeParse({ ...asked, purpose: 'reset' }).success).toBe(false);
    expect(AskCodeBody.safeParse({ ...asked, language: 'fr' }).success).toBe(false);
  });
});

describe('a password', () => {
  const takes = (password: string) => SetPasswordBody.safeParse({ password }).success;

  // NIST SP 800-63B-4: at least 15 characters where it is the only factor, at least 64 allowed, spaces and any
  // printable character allowed, no rule of composition.
  it('is long, and of whatever its owner likes', () => {
    expect(PASSWORD_MIN).toBe(15);
    expect(PASSWORD_MAX).toBeGreaterThanOrEqual(64);
    expect([takes('x'.repeat(14)), takes('x'.repeat(15))]).toEqual([false, true]);
    expect([takes('x'.repeat(128)), takes('x'.repeat(129))]).toEqual([true, false]);
    expect(takes('all small letters, ñ y 水')).toBe(true);
  });

  it('keeps its spaces, also at the ends', () => {
    expect(SetPasswordBody.parse({ password: ` ${'x'.repeat(15)} ` }).password).toHaveLength(17);
  });

  it('is not held to a length at sign-in', () => {
    expect(PasswordSignInBody.safeParse({ email: 'Wes@Example.com', password: 'short' }).success).toBe(true);
    expect(PasswordSignInBody.safeParse({ email: 'wes@example.com', password: '' }).success).toBe(false);
  });
});
