import fc from 'fast-check';
import { DateTime } from 'luxon';
import { describe, expect, it } from 'vitest';
import {
  afterQuietHours,
  halfOf,
  instantOf,
  isOpenAt,
  isSameDay,
  isWorkingDay,
  workingDays,
  type WeekHours,
} from './hours';

const DENVER = 'America/Denver';
const usual = [{ from: '07:00', to: '17:00' }];
const HOURS: WeekHours = {
  1: usual,
  2: usual,
  3: usual,
  4: usual,
  5: [
    { from: '07:00', to: '12:00' },
    { from: '13:00', to: '15:00' },
  ],
  6: [],
  7: [],
};
const day = (date: string) => DateTime.fromISO(date, { zone: DENVER });
const dates = (days: DateTime[]) => days.map((one) => one.toISODate());

const clocks = new Map<string, Intl.DateTimeFormat>();
/** The wall clock by Intl alone: another implementation of time zones than the code's. */
function wallClock(at: Date, zone: string): string {
  const options = { timeZone: zone, hour: '2-digit', minute: '2-digit' } as const;
  const clock = clocks.get(zone) ?? new Intl.DateTimeFormat('en-GB', options);
  clocks.set(zone, clock);
  return clock.format(at);
}

describe('working days', () => {
  it('are those with hours and without a closure', () => {
    const closures = [{ from: '2026-12-24', to: '2026-12-25' }];
    const found = workingDays(day('2026-12-21'), 14, HOURS, closures);
    expect(dates(found)).toEqual([
      '2026-12-21',
      '2026-12-22',
      '2026-12-23',
      '2026-12-28',
      '2026-12-29',
      '2026-12-30',
      '2026-12-31',
      '2027-01-01',
    ]);
  });

  it('include the first and the last day of a closure in it', () => {
    const closures = [{ from: '2026-12-02', to: '2026-12-03' }];
    const open = ['2026-12-01', '2026-12-02', '2026-12-03', '2026-12-04'].map((date) =>
      isWorkingDay(day(date), HOURS, closures),
    );
    expect(open).toEqual([true, false, false, true]);
  });

  it('count calendar days over both clock changes, each once', () => {
    const every: WeekHours = { ...HOURS, 6: usual, 7: usual };
    for (const from of ['2026-03-06', '2026-10-30']) {
      const found = workingDays(day(from).set({ hour: 23, minute: 30 }), 5, every, []);
      const start = Number(from.slice(8));
      const expected = [0, 1, 2, 3, 4].map(
        (n) => new Date(Date.UTC(2026, Number(from.slice(5, 7)) - 1, start + n)),
      );
      expect(dates(found)).toEqual(expected.map((date) => date.toISOString().slice(0, 10)));
      for (const one of found) expect(wallClock(one.toJSDate(), DENVER)).toBe('00:00');
    }
  });
});

describe('opening', () => {
  it.each([
    ['2026-12-01', '06:59', false],
    ['2026-12-01', '07:00', true],
    ['2026-12-01', '16:59', true],
    ['2026-12-01', '17:00', false],
    ['2026-12-04', '12:00', false],
    ['2026-12-04', '12:59', false],
    ['2026-12-04', '13:00', true],
    ['2026-12-05', '09:00', false],
  ])('on %s at %s: %s', (date, time, open) => {
    expect(isOpenAt(day(date), time, HOURS)).toBe(open);
  });

  it('is parted into half-days by noon', () => {
    expect(['00:00', '11:59', '12:00', '23:59'].map(halfOf)).toEqual(['am', 'am', 'pm', 'pm']);
  });
});

describe('instantOf', () => {
  // 15 U.S.C. 260a: forward on the second Sunday of March, back on the first of November, at two in the morning.
  it.each([
    ['2026-03-07', '08:00', '2026-03-07T15:00:00.000Z'],
    ['2026-03-08', '01:59', '2026-03-08T08:59:00.000Z'],
    ['2026-03-08', '03:00', '2026-03-08T09:00:00.000Z'],
    ['2026-03-08', '08:00', '2026-03-08T14:00:00.000Z'],
    ['2026-07-01', '08:00', '2026-07-01T14:00:00.000Z'],
    ['2026-11-01', '02:00', '2026-11-01T09:00:00.000Z'],
    ['2026-12-01', '08:00', '2026-12-01T15:00:00.000Z'],
  ])('in Denver on %s at %s is %s', (date, time, instant) => {
    expect(instantOf(date, time, DENVER).toJSDate().toISOString()).toBe(instant);
  });

  it('goes on after the hour that is skipped', () => {
    expect(instantOf('2026-03-08', '02:30', DENVER).toJSDate().toISOString()).toBe(
      '2026-03-08T09:30:00.000Z',
    );
  });
});

describe('quiet hours', () => {
  const NIGHT = { from: '20:00', to: '08:00' };
  const after = (at: string, quiet = NIGHT, zone = DENVER) =>
    afterQuietHours(new Date(at), zone, quiet).toISOString();

  it.each([
    // The evening and the morning around each clock change, and a summer and a winter day.
    ['2026-03-07T14:59:59.999Z', '2026-03-07T15:00:00.000Z'],
    ['2026-03-08T03:00:00.000Z', '2026-03-08T14:00:00.000Z'],
    ['2026-03-08T09:00:00.000Z', '2026-03-08T14:00:00.000Z'],
    ['2026-07-01T13:00:00.000Z', '2026-07-01T14:00:00.000Z'],
    ['2026-11-01T02:00:00.000Z', '2026-11-01T15:00:00.000Z'],
    ['2026-11-01T08:30:00.000Z', '2026-11-01T15:00:00.000Z'],
    ['2026-12-01T04:00:00.000Z', '2026-12-01T15:00:00.000Z'],
  ])('hold what falls due at %s until %s', (at, until) => {
    expect(after(at)).toBe(until);
  });

  it('begin with their first minute and end with the first minute after', () => {
    expect(after('2026-12-02T02:59:59.999Z')).toBe('2026-12-02T02:59:59.999Z');
    expect(after('2026-12-02T03:00:00.000Z')).toBe('2026-12-02T15:00:00.000Z');
    expect(after('2026-12-02T15:00:00.000Z')).toBe('2026-12-02T15:00:00.000Z');
  });

  it('are the reader’s, wherever the shop is', () => {
    const at = '2026-12-02T02:00:00.000Z';
    expect(after(at, NIGHT, 'America/New_York')).toBe('2026-12-02T13:00:00.000Z');
    expect(after(at, NIGHT, 'America/Phoenix')).toBe(at);
  });

  it('may lie within a day, or be none', () => {
    expect(after('2026-12-01T19:30:00.000Z', { from: '12:00', to: '13:00' })).toBe(
      '2026-12-01T20:00:00.000Z',
    );
    expect(after('2026-12-01T20:00:00.000Z', { from: '12:00', to: '13:00' })).toBe(
      '2026-12-01T20:00:00.000Z',
    );
    expect(after('2026-12-01T07:00:00.000Z', { from: '08:00', to: '08:00' })).toBe(
      '2026-12-01T07:00:00.000Z',
    );
  });

  it('that end in the hour which comes twice hold until its second time, never until a time gone by', () => {
    const late = { from: '20:00', to: '01:30' };
    expect(after('2026-11-01T06:30:00.000Z', late)).toBe('2026-11-01T07:30:00.000Z');
    expect(after('2026-11-01T08:10:00.000Z', late)).toBe('2026-11-01T08:30:00.000Z');
  });

  const minute = 60_000;
  const time = fc
    .tuple(fc.constantFrom(0, 1, 3, 5, 8, 12, 18, 20, 23), fc.constantFrom('00', '30'))
    .map(([hour, half]) => `${String(hour).padStart(2, '0')}:${half}`);
  const around = (iso: string) =>
    fc.integer({ min: -24 * 60, max: 24 * 60 }).map((n) => new Date(Date.parse(iso) + n * minute));
  const instant = fc.oneof(
    around('2026-03-08T09:00:00Z'),
    around('2026-11-01T08:00:00Z'),
    around('2026-07-01T12:00:00Z'),
  );
  const isQuiet = (at: Date, zone: string, { from, to }: typeof NIGHT) => {
    const now = wallClock(at, zone);
    if (from === to) return false;
    return from < to ? now >= from && now < to : now >= from || now < to;
  };

  it('end at the first minute that Intl says is outside', () => {
    const zones = fc.constantFrom(DENVER, 'America/New_York', 'America/Phoenix', 'Pacific/Honolulu');
    fc.assert(
      fc.property(instant, zones, time, time, (at, zone, from, to) => {
        // One that begins within the hour which comes twice is held through both of them.
        fc.pre(!from.startsWith('01'));
        let expected = at;
        while (isQuiet(expected, zone, { from, to })) expected = new Date(expected.getTime() + minute);
        expect(afterQuietHours(at, zone, { from, to })).toEqual(expected);
      }),
      { numRuns: 150 },
    );
  });
});

describe('isSameDay', () => {
  const denver = (one: string, other: string) => isSameDay(new Date(one), new Date(other), 'America/Denver');

  it('goes by the shop’s calendar, not by that of Greenwich', () => {
    expect(denver('2026-12-03T16:00:00Z', '2026-12-04T06:59:00Z')).toBe(true);
    expect(denver('2026-12-04T06:59:00Z', '2026-12-04T07:00:00Z')).toBe(false);
  });

  it('holds on the days of 23 and 25 hours', () => {
    expect(denver('2026-03-08T07:00:00Z', '2026-03-09T05:59:00Z')).toBe(true);
    expect(denver('2026-11-01T06:00:00Z', '2026-11-02T06:59:00Z')).toBe(true);
    expect(denver('2026-03-08T07:00:00Z', '2026-03-09T06:00:00Z')).toBe(false);
  });
});
