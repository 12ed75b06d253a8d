/**
 * Places: room for machines in a half-day. Taken in one guarded update with a check constraint behind it, so that
 * no two bookings get the same place however they race.
 */
import { AppError } from '#server/errors';
import type { Ctx } from '#server/lib/context';
import { newId } from '#server/lib/ids';
import type { OpenShop } from '#server/lib/shops';
import { run } from '#server/lib/db';
import { HalfDayEvent } from '#server/models/index';
import { nextFreeTimes } from '#server/queries/times';
import { halfOf, type Half } from '#shared/domain/hours';
import type { TimesFullDetails } from '#shared/schemas/shop';
import { DateTime } from 'luxon';

/** The half-day of an instant on the shop's own calendar. */
export function halfDayOf(at: Date, zone: string): { day: string; half: Half } {
  const local = DateTime.fromJSDate(at, { zone });
  return { day: local.toISODate() ?? '', half: halfOf(local.toFormat('HH:mm')) };
}

/**
 * Takes n places or none.
 * @returns the id of the half-day
 * @throws AppError times_full with the next free times
 */
export async function takePlaces(ctx: Ctx, shop: OpenShop, arrivesAt: Date, count: number): Promise<string> {
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
  const details: TimesFullDetails = { half, next: await nextFreeTimes(shop, ctx.now, count) };
  throw new AppError('times_full', { details });
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
