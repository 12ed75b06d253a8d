import { describe, expect, it } from 'vitest';
import { formatDay, formatLongDay, formatTime, formatWhen, formatZone } from './when';

const DENVER = 'America/Denver';
const nine = '2026-12-03T16:00:00Z';

describe('a date', () => {
  it('is short in both languages', () => {
    expect(formatDay(nine, DENVER, 'en')).toBe('Thu 3 Dec');
    expect(formatDay(nine, DENVER, 'es')).toBe('jue 3 dic');
  });

  it('is long in both languages', () => {
    expect(formatLongDay(nine, DENVER, 'en')).toBe('Thursday 3 December');
    expect(formatLongDay(nine, DENVER, 'es')).toBe('jueves 3 de diciembre');
  });

  it('is the shop’s, not the server’s', () => {
    const lateEvening = '2026-12-04T06:59:00Z';
    expect(formatDay(lateEvening, DENVER, 'en')).toBe('Thu 3 Dec');
    expect(formatDay(lateEvening, 'Europe/Madrid', 'es')).toBe('vie 4 dic');
  });

  it.each(Array.from({ length: 12 }, (_, month) => month))(
    'has no dots and one space each in month %#',
    (month) => {
      const at = new Date(Date.UTC(2026, month, 8, 18));
      for (const language of ['en', 'es'] as const) {
        expect(formatDay(at, DENVER, language)).toMatch(/^\p{L}+ 8 \p{L}+$/u);
      }
    },
  );
});

describe('a time', () => {
  it.each([
    ['2026-12-03T16:00:00Z', '9:00 am'],
    ['2026-12-03T19:00:00Z', '12:00 pm'],
    ['2026-12-03T07:00:00Z', '12:00 am'],
    ['2026-12-03T22:30:00Z', '3:30 pm'],
  ])('of %s reads %s in both languages, with plain spaces', (at, words) => {
    expect(formatTime(at, DENVER, 'en')).toBe(words);
    expect(formatTime(at, DENVER, 'es')).toBe(words);
  });
});

describe('the zone', () => {
  // 15 U.S.C. 260a; in 2026 the change is at 09:00Z on 8 March and at 08:00Z on 1 November.
  it.each([
    ['2026-03-08T08:59:59Z', '1:59 am', 'MST'],
    ['2026-03-08T09:00:00Z', '3:00 am', 'MDT'],
    ['2026-11-01T07:59:59Z', '1:59 am', 'MDT'],
    ['2026-11-01T08:00:00Z', '1:00 am', 'MST'],
  ])('at %s says which clock is meant', (at, time, zone) => {
    expect(formatTime(at, DENVER, 'en')).toBe(time);
    expect(formatZone(at, DENVER)).toBe(zone);
  });

  it('stands behind the whole of it, in both languages', () => {
    expect(formatWhen(nine, DENVER, 'en')).toBe('Thu 3 Dec, 9:00 am MST');
    expect(formatWhen('2026-07-03T15:00:00Z', DENVER, 'es')).toBe('vie 3 jul, 9:00 am MDT');
  });
});
