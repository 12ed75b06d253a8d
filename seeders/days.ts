import { DateTime } from 'luxon';
import { isWorkingDay, instantOf, type WeekHours } from '#shared/domain/hours';

const LOOK_BACK_DAYS = 60;
const LOOK_AHEAD_DAYS = 40;

/** Turns "two working days ago, 09:20" into an instant, counted from the shop's current working day. */
export function demoCalendar(now: Date, zone: string, hours: WeekHours): (day: number, time: string) => Date {
  const today = DateTime.fromJSDate(now, { zone }).startOf('day');
  const first = today.minus({ days: LOOK_BACK_DAYS });
  const all = Array.from({ length: LOOK_BACK_DAYS + LOOK_AHEAD_DAYS }, (_, index) =>
    first.plus({ days: index }),
  );
  const working = all.filter((day) => isWorkingDay(day, hours, []));
  const base = working.findLastIndex((day) => day <= today);
  return (offset, time) => {
    const day = working[base + offset];
    if (!day) throw new RangeError(`the demo knows no working day ${offset}`);
    return instantOf(day.toISODate() ?? '', time, zone).toJSDate();
  };
}
