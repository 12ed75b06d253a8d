/**
 * Places: room for machines in a half-day. Taken in one guarded update with a check constraint behind it, so that
 * no two bookings get the same place however they race.
 */
import { AppError, fieldError } from '#server/errors';
import type { Ctx } from '#server/lib/context';
import { newId } from '#server/lib/ids';
import type { ShopProfile } from '#server/lib/shops';
import { run } from '#server/lib/db';
import { HalfDayEvent } from '#server/models/index';
import { freeDays, nextFree, timeAt } from '#server/queries/times';
import { halfOf, type Half } from '#shared/domain/hours';
import type { FreeDay, TimesFullDetails } from '#shared/schemas/shop';
import { DateTime } from 'luxon';

/** The half-day of an instant on the shop's own calendar. */
export function halfDayOf(at: Date, zone: string): { day: string; half: Half } {
  const local = DateTime.fromJSDate(at, { zone });
  return { day: local.toISODate() ?? '', half: halfOf(local.toFormat('HH:mm')) };
}

/**
 * Refuses what is plain before anything is written: a time that is not offered, or one that is full by now. Of those
 * who race for the last place most end here, at little cost; `takePlaces` decides among the rest.
 * @throws AppError invalid, times_full with the next free times
 */
export async function refuseTime(ctx: Ctx, shop: ShopProfile, arrivesAt: Date, count: number): Promise<void> {
  const days = await freeDays(shop, ctx.now, count);
  const time = timeAt(days, arrivesAt);
  if (!time) throw fieldError('arrivesAt', 'errors.field.time_not_offered');
  if (time.full) throw timesFull(halfDayOf(arrivesAt, shop.zone).half, days);
}

function timesFull(half: Half, days: readonly FreeDay[]): AppError {
  const details: TimesFullDetails = { half, next: nextFree(days) };
  return new AppError('times_full', { details });
}

/**
 * Takes n places or none.
 * @returns the id of the half-day
 * @throws AppError times_full with the next free times
 */
export async function takePlaces(
  ctx: Ctx,
  shop: ShopProfile,
  arrivesAt: Date,
  count: number,
): Promise<string> {
  const { day, half } = halfDayOf(arrivesAt, shop.zone);
  await run(
    `insert into half_days (shop_id, id, day, half, places) values ($1, $2, $3, $4, $5)
     on conflict (shop_id, day, half) do nothing`,
    [shop.id, newId(), day, half, shop.settings.placesPerHalfDay],
  );
  const [taken] = await run<{ id: string }>(
    `update half_days set taken = taken + $3 where day = $1 and half = $2 and taken + $3 <= places + over returning id`,
    [day, half, count],
  );
  if (taken) return taken.id;
  throw timesFull(half, await freeDays(shop, ctx.now, count));
}

/** Gives one job's place back. */
export async function givePlaceBack(halfDayId: string): Promise<void> {
  await run('update half_days set taken = taken - 1 where id = $1', [halfDayId]);
}

/** Takes a place again for a cancel taken back; where it is gone meanwhile, the half-day holds one more, as an event. */
export async function retakePlace(ctx: Ctx, halfDayId: string, reason: string): Promise<void> {
  // Locked first: beside others who do the same, each has to see what the one before him left.
  const [before] = await run<{ over: number }>('select over from half_days where id = $1 for update', [
    halfDayId,
  ]);
  const [now] = await run<{ over: number }>(
    `update half_days set taken = taken + 1, over = greatest(over, taken + 1 - places)
     where id = $1 returning over`,
    [halfDayId],
  );
  if (!before || !now || now.over === before.over) return;
  await HalfDayEvent.create({
    shopId: ctx.shopId,
    id: newId(),
    halfDayId,
    kind: 'over_raised',
    at: ctx.now,
    personId: ctx.actor?.personId ?? null,
    byName: ctx.actor?.name ?? '',
    reason,
    places: now.over - before.over,
  });
}
