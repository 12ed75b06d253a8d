/**
 * A shop's opening: hours by ISO weekday, closures by date, arrival times, and the half-days that places are
 * counted in. Wall clock of the shop's zone throughout; noon parts the half-days.
 */
import { DateTime } from 'luxon';

export type Weekday = '1' | '2' | '3' | '4' | '5' | '6' | '7';
export type WeekHours = Record<Weekday, { from: string; to: string }[]>;
export interface Closure {
  /** First and last day closed, 'YYYY-MM-DD', both included. */
  from: string;
  to: string;
}
export type Half = 'am' | 'pm';

/** The ISO weekday of a day as the key of WeekHours. */
function weekdayOf(day: DateTime): Weekday {
  return String(day.weekday) as Weekday;
}

/** Whether two instants fall on the same day of the shop's calendar. */
export function isSameDay(one: Date, other: Date, zone: string): boolean {
  return DateTime.fromJSDate(one, { zone }).hasSame(DateTime.fromJSDate(other, { zone }), 'day');
}

/** Whether the shop opens at all on that day of its own calendar. */
export function isWorkingDay(day: DateTime, hours: WeekHours, closures: readonly Closure[]): boolean {
  const date = day.toISODate() ?? '';
  if (closures.some((closure) => closure.from <= date && date <= closure.to)) return false;
  return hours[weekdayOf(day)].length > 0;
}

/** Whether a wall-clock time 'HH:mm' lies within that weekday's opening; the closing minute does not. */
export function isOpenAt(day: DateTime, time: string, hours: WeekHours): boolean {
  return hours[weekdayOf(day)].some((span) => span.from <= time && time < span.to);
}

/** The half-day of a wall-clock time 'HH:mm'. */
export function halfOf(time: string): Half {
  return time < '12:00' ? 'am' : 'pm';
}

/** The instant of a wall-clock time on a date; in the hour that a clock change skips, the time after it. */
export function instantOf(date: string, time: string, zone: string): DateTime {
  return DateTime.fromISO(`${date}T${time}`, { zone });
}

/**
 * The days on which the shop opens, from a day on.
 * @param days how many calendar days to look through
 */
export function workingDays(
  from: DateTime,
  days: number,
  hours: WeekHours,
  closures: readonly Closure[],
): DateTime[] {
  const all = Array.from({ length: days }, (_, index) => from.startOf('day').plus({ days: index }));
  return all.filter((day) => isWorkingDay(day, hours, closures));
}

/** The first instant at or after `at` when the wall clock in `zone` lies outside the quiet hours [from, to). */
export function afterQuietHours(at: Date, zone: string, quiet: { from: string; to: string }): Date {
  const local = DateTime.fromJSDate(at, { zone });
  const time = local.toFormat('HH:mm');
  const isOvernight = quiet.from > quiet.to;
  const isQuiet = isOvernight ? time >= quiet.from || time < quiet.to : time >= quiet.from && time < quiet.to;
  if (quiet.from === quiet.to || !isQuiet) return at;
  const endDay = isOvernight && time >= quiet.from ? local.plus({ days: 1 }) : local;
  const end = instantOf(endDay.toISODate() ?? '', quiet.to, zone);
  // Where the clock goes back, that time comes twice: the first may be over already.
  const ends = end.getPossibleOffsets().filter((candidate) => candidate.toMillis() >= at.getTime());
  return (ends[0] ?? end).toJSDate();
}
