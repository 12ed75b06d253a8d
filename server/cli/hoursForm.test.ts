import { describe, expect, it } from 'vitest';
import { parseHours } from './hoursForm';

describe('opening hours as typed', () => {
  it('reads days and spans', () => {
    const hours = parseHours('mon-fri 7:00-17:00, sat 08:00-12:00');
    expect(hours?.[1]).toEqual([{ from: '07:00', to: '17:00' }]);
    expect(hours?.[5]).toEqual([{ from: '07:00', to: '17:00' }]);
    expect(hours?.[6]).toEqual([{ from: '08:00', to: '12:00' }]);
    expect(hours?.[7]).toEqual([]);
  });

  it('takes two spans of one day, in order', () => {
    expect(parseHours('mon 07:00-12:00, mon 13:00-24:00')?.[1]).toHaveLength(2);
  });

  it.each([
    '',
    'someday 7:00-9:00',
    'mon 9:00-7:00',
    'fri-mon 7:00-9:00',
    'mon 7-9',
    'mon 07:00-25:00',
    'mon 07:00-12:00, mon 11:00-13:00',
  ])('cannot read %j', (typed) => {
    expect(parseHours(typed)).toBeNull();
  });
});
