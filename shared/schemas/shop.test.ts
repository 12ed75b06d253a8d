import { describe, expect, it } from 'vitest';
import { TimesQuery } from './shop';

describe('asking for times', () => {
  it('is for one machine unless said otherwise, and for at most twelve', () => {
    expect(TimesQuery.parse({})).toEqual({ machines: 1 });
    expect(TimesQuery.parse({ machines: '12' })).toEqual({ machines: 12 });
    for (const machines of ['0', '13', '1.5', 'two', '-1']) {
      expect(TimesQuery.safeParse({ machines }).success, machines).toBe(false);
    }
    expect(TimesQuery.safeParse({ machines: '1', shop: 'other' }).success).toBe(false);
  });
});
