import { DateTime } from 'luxon';
import type { ShopProfile } from '#server/lib/shops';
import { rows } from '#server/lib/db';
import { halfOf, instantOf, isOpenAt, workingDays, type Closure } from '#shared/domain/hours';
import type { FreeDay, FreeTime } from '#shared/schemas/shop';

const DAYS = 28;
const NEXT = 6;

/** The shop's closures from a date on. Inside a unit of work. */
export function closuresFrom(date: string): Promise<Closure[]> {
  return rows<Closure>(
    `select from_date::text as "from", to_date::text as "to" from closures where to_date >= $1 order by from_date`,
    [date],
  );
}

/**
 * The arrival times of four weeks, each with whether its half-day still has room for `count` machines. Times already
 * past are left out. Inside a unit of work.
 */
export async function freeDays(shop: ShopProfile, now: Date, count: number): Promise<FreeDay[]> {
  const today = DateTime.fromJSDate(now, { zone: shop.zone }).startOf('day');
  const date = today.toISODate() ?? '';
  const days = workingDays(today, DAYS, shop.settings.hours, await closuresFrom(date));
  const left = await placesLeft(date);
  return days.map((day) =>
    freeDay(shop, day, now, (key) => (left.get(key) ?? shop.settings.placesPerHalfDay) >= count),
  );
}

async function placesLeft(from: string): Promise<Map<string, number>> {
  const halves = await rows<{ key: string; room: number }>(
    `select day::text || half as key, places + over - taken as room from half_days where day >= $1`,
    [from],
  );
  return new Map(halves.map(({ key, room }) => [key, room]));
}

function freeDay(shop: ShopProfile, day: DateTime, now: Date, hasRoom: (key: string) => boolean): FreeDay {
  const date = day.toISODate() ?? '';
  const times = shop.settings.arrivalTimes
    .filter((time) => isOpenAt(day, time, shop.settings.hours))
    .map((time) => ({ time, at: instantOf(date, time, shop.zone) }))
    .filter(({ at }) => at.toMillis() > now.getTime())
    .map(({ time, at }) => ({ at: at.toISO() ?? '', full: !hasRoom(date + halfOf(time)) }));
  return { date, times };
}

/** The next free times of these days, at most six. */
export function nextFree(days: readonly FreeDay[]): string[] {
  const free = days.flatMap((day) => day.times).filter((time) => !time.full);
  return free.slice(0, NEXT).map((time) => time.at);
}

/** The arrival time that an instant is, full or not; undefined for an instant that is not offered. */
export function timeAt(days: readonly FreeDay[], at: Date): FreeTime | undefined {
  return days.flatMap((day) => day.times).find((time) => new Date(time.at).getTime() === at.getTime());
}
