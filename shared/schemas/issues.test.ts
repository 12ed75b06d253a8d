import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { BookBody, BookingGuest } from './booking';
import { describeIssues } from './issues';
import { AskCodeBody } from './session';
import en from '../locales/en/errors.json';

const described = (schema: z.ZodType, body: unknown) => {
  const result = schema.safeParse(body);
  return result.success ? [] : describeIssues(result.error.issues);
};

describe('what is said about a wrong body', () => {
  it('takes a message of ours as the key', () => {
    expect(described(AskCodeBody, { phone: '12', purpose: 'book', language: 'en' })).toEqual([
      { path: 'phone', key: 'errors.field.phone' },
    ]);
  });

  it('asks for what is missing, and to choose what is not one of the choices', () => {
    expect(described(AskCodeBody, { purpose: 'party', language: 'en' })).toEqual([
      { path: 'phone', key: 'errors.field.required' },
      { path: 'purpose', key: 'errors.field.choose' },
    ]);
  });

  it('names the path inside lists, and the number that was passed over', () => {
    const machine = { from: 'new', kind: 'pump', complaintKindId: '', words: 'x'.repeat(501) };
    const found = described(BookBody, {
      arrivesAt: '2026-12-02T09:00:00-07:00',
      machines: [machine],
      language: 'en',
      textConsent: true,
    });
    expect(found).toContainEqual({ path: 'machines.0.complaintKindId', key: 'errors.field.uuid' });
    expect(found).toContainEqual({
      path: 'machines.0.words',
      key: 'errors.field.too_long',
      params: { max: 500 },
    });
  });

  it('looks into a union for the branch that has something to say', () => {
    const body = { name: 'A', accountName: 'B', phone: '(303) 555-0142', email: 'nonsense' };
    expect(described(BookingGuest, body)).toContainEqual({
      path: 'email',
      key: 'errors.field.email',
    });
  });

  it('points at the field that does not belong', () => {
    expect(described(z.strictObject({}), { price: 1 })).toEqual([
      { path: 'price', key: 'errors.field.unknown' },
    ]);
  });

  it.each([
    [z.string().min(3), 'a', 'too_short', { min: 3 }],
    [z.string().min(1), '', 'required', { min: 1 }],
    [z.array(z.string()).max(1), ['a', 'b'], 'too_many', { max: 1 }],
    [z.array(z.string()).min(1), [], 'too_few', { min: 1 }],
    [z.number().max(5), 6, 'too_big', { max: 5 }],
    [z.number().min(5), 4, 'too_small', { min: 5 }],
    [z.number(), 'six', 'wrong', undefined],
  ])('has a sentence for every kind of issue (%#)', (schema, value, name, params) => {
    const [issue] = described(schema, value);
    expect(issue?.key).toBe(`errors.field.${name}`);
    expect(issue?.params).toEqual(params);
    expect(Object.keys(en.errors.field)).toContain(name);
  });

  it('says one thing per field', () => {
    const twice = z.string().min(3, 'errors.field.code').regex(/x/, 'errors.field.characters');
    expect(described(z.object({ code: twice }), { code: 'a' })).toHaveLength(1);
  });
});
