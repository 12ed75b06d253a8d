/** Free times as the calendar pages through them, and whether the chosen one still has room. */
import { DateTime } from 'luxon';
import { computed, shallowRef, toValue, watch, type MaybeRefOrGetter } from 'vue';
import { useTimesQuery } from '@/queries/shops';
import type { FreeDay, FreeTime } from '#shared/schemas/shop';

/** Working days on one page: a week on a desktop, five day buttons on a phone. */
const PAGE = 5;

export interface SlotTime extends FreeTime {
  /** Wall clock of the shop, 'YYYY-MM-DDTHH:mm', which is what the calendar draws. */
  wall: string;
}
export interface SlotDay {
  date: string;
  times: SlotTime[];
}

/** Days with the shop's wall clock beside each instant; days without a time left are dropped. */
export function slotDays(days: readonly FreeDay[], zone: string): SlotDay[] {
  const wallOf = (at: string): string => DateTime.fromISO(at, { zone }).toFormat("yyyy-MM-dd'T'HH:mm");
  return days
    .filter((day) => day.times.length > 0)
    .map((day) => ({ date: day.date, times: day.times.map((time) => ({ ...time, wall: wallOf(time.at) })) }));
}

/** Weekdays (0 = Sunday) on which the shop takes nothing in during the whole span: the calendar leaves them out. */
export function closedWeekdays(days: readonly SlotDay[]): number[] {
  const open = new Set(days.map((day) => DateTime.fromISO(day.date, { zone: 'utc' }).weekday % 7));
  return [0, 1, 2, 3, 4, 5, 6].filter((weekday) => !open.has(weekday));
}

/** How the chosen time stands: `none` chosen, `free`, `full` for this number of machines, or `gone`. */
export function standingOf(days: readonly SlotDay[], arrivesAt: string): 'none' | 'free' | 'full' | 'gone' {
  if (!arrivesAt) return 'none';
  const instant = Date.parse(arrivesAt);
  const found = days.flatMap((day) => day.times).find((time) => Date.parse(time.at) === instant);
  if (!found) return 'gone';
  return found.full ? 'full' : 'free';
}

/** The times of a shop for a number of machines; asked again whenever that number changes. */
export function useBookingTimes(
  slug: string,
  machines: MaybeRefOrGetter<number>,
  arrivesAt: MaybeRefOrGetter<string>,
) {
  const { data, error, refetch } = useTimesQuery(slug, () => Math.max(1, toValue(machines)));
  const days = computed(() => (data.value ? slotDays(data.value.days, data.value.zone) : []));
  const pages = computed(() =>
    Array.from({ length: Math.ceil(days.value.length / PAGE) }, (_, page) =>
      days.value.slice(page * PAGE, (page + 1) * PAGE),
    ),
  );
  const standing = computed(() => (data.value ? standingOf(days.value, toValue(arrivesAt)) : 'none'));

  const page = shallowRef(0);
  const date = shallowRef('');
  const current = computed(() => pages.value[page.value] ?? []);
  const dateOfChosen = computed(
    () => days.value.find((day) => day.times.some((time) => time.at === toValue(arrivesAt)))?.date,
  );

  function show(day: string): void {
    const index = pages.value.findIndex((each) => each.some((one) => one.date === day));
    if (index < 0) return;
    page.value = index;
    date.value = day;
  }
  function turn(by: 1 | -1): void {
    const first = pages.value[page.value + by]?.[0];
    if (first) show(first.date);
  }
  // A first look lands on the chosen time, or on the first day that has room.
  watch(
    days,
    (now) => {
      if (now.some((day) => day.date === date.value)) return show(date.value);
      const withRoom = now.find((day) => day.times.some((time) => !time.full)) ?? now[0];
      const start = dateOfChosen.value ?? withRoom?.date;
      if (start) show(start);
    },
    { immediate: true },
  );

  return { data, error, refetch, days, pages, page, current, date, standing, show, turn };
}

export type BookingTimes = ReturnType<typeof useBookingTimes>;
