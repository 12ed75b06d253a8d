import { DateTime } from 'luxon';
import type { Ctx } from '#server/lib/context';
import { unitShopOf } from '#server/lib/shops';
import { railJobs } from '#server/queries/railJobs';
import { closuresFrom } from '#server/queries/times';
import { workingDays } from '#shared/domain/hours';
import type { RailView } from '#shared/schemas/job';
import { presentRailJob } from './railJob';

const BOOKED_DAYS = 5;
/** Calendar days looked through for the next working days; a closure longer than this shows fewer. */
const HORIZON = 28;

/** The Rail: open jobs, those arriving within five working days, those collected today. Inside a unit of work. */
export async function presentRail(ctx: Ctx): Promise<RailView> {
  const shop = await unitShopOf(ctx.shopId);
  const today = DateTime.fromJSDate(ctx.now, { zone: shop.zone }).startOf('day');
  const closures = await closuresFrom(today.toISODate() ?? '');
  const days = workingDays(today, HORIZON, shop.settings.hours, closures);
  const lastDay = days.slice(0, BOOKED_DAYS).at(-1) ?? today;
  const jobs = await railJobs(lastDay.plus({ days: 1 }).toJSDate(), today.toJSDate());
  return {
    now: ctx.now.toISOString(),
    zone: shop.zone,
    unpaidLimitCents: shop.settings.unpaidLimitCents,
    pegs: shop.settings.pegs,
    jobs: jobs.map((row) => presentRailJob(row, ctx.actor, ctx.now)),
  };
}
