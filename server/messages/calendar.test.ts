import ICAL from 'ical.js';
import { describe, expect, it } from 'vitest';
import { instantOf } from '#shared/domain/hours';
import { calendarFile, type CalendarFacts } from './calendar';

const facts = (startsAt: Date, more: Partial<CalendarFacts> = {}): CalendarFacts => ({
  visitId: '0b2f6a3e-6f0e-4a6e-9a7c-2b8d7e1c5f01',
  host: 'benchbell.example',
  startsAt,
  stamp: new Date('2026-12-01T18:40:00Z'),
  sequence: 0,
  isCancelled: false,
  summary: 'Drop-off at Cinder Flat: 3 machines',
  description: 'Stub 5WN-3KT. Bring: No. 9, No. 17; a "pump", \\ and\nno more.',
  location: 'Cinder Flat Equipment Repair, 418 Flatiron Rd',
  ...more,
});
/** Read back by another library than the one that writes. */
const read = (file: string) => {
  const calendar = new ICAL.Component(ICAL.parse(file) as unknown[]);
  return { calendar, event: new ICAL.Event(calendar.getFirstSubcomponent('vevent') ?? undefined) };
};

describe('the calendar file, read back by ical.js', () => {
  // Hours on both sides of both clock changes in Denver; instants as ICU gives them.
  it.each([
    ['2026-07-01', '08:00', '2026-07-01T14:00:00.000Z'],
    ['2026-12-01', '08:00', '2026-12-01T15:00:00.000Z'],
    ['2026-11-01', '00:30', '2026-11-01T06:30:00.000Z'],
    ['2026-11-01', '02:30', '2026-11-01T09:30:00.000Z'],
    ['2026-03-08', '01:59', '2026-03-08T08:59:00.000Z'],
    ['2026-03-09', '08:00', '2026-03-09T14:00:00.000Z'],
    ['2026-10-30', '15:30', '2026-10-30T21:30:00.000Z'],
    ['2026-11-02', '15:30', '2026-11-02T22:30:00.000Z'],
  ])('%s %s in Denver is %s', (date, time, instant) => {
    const { event } = read(calendarFile(facts(instantOf(date, time, 'America/Denver').toJSDate())));
    expect(event.startDate.toJSDate().toISOString()).toBe(instant);
    expect(event.duration.toSeconds()).toBe(30 * 60);
  });

  it('announces, and carries every word unchanged', () => {
    const given = facts(new Date('2026-12-03T16:00:00Z'));
    const { calendar, event } = read(calendarFile(given));
    expect(calendar.getFirstPropertyValue('method')).toBe('PUBLISH');
    expect([event.summary, event.description, event.location]).toEqual([
      given.summary,
      given.description,
      given.location,
    ]);
  });

  it('keeps one UID a visit, counts changes and says when it is off', () => {
    const at = new Date('2026-12-03T16:00:00Z');
    const first = read(calendarFile(facts(at))).event;
    const last = read(calendarFile(facts(at, { sequence: 2, isCancelled: true }))).event;
    const other = read(calendarFile(facts(at, { visitId: '5f01' }))).event;
    expect([last.uid === first.uid, other.uid === first.uid]).toEqual([true, false]);
    expect([first.sequence, last.sequence]).toEqual([0, 2]);
    expect(last.component.getFirstPropertyValue('status')).toBe('CANCELLED');
    expect(first.uid).not.toContain('0b2f6a3e');
  });

  it('ends its lines as the standard has it, none longer than 75 octets', () => {
    const file = calendarFile(facts(new Date('2026-12-03T16:00:00Z')));
    expect(file.split('\r\n').filter((line) => Buffer.byteLength(line) > 75)).toEqual([]);
    expect(file.replaceAll('\r\n', '')).not.toContain('\n');
  });
});
