/** Booking a drop-off, by whoever is signed in or by a guest with a proved phone. */
import { bookVisit } from '#server/commands/bookVisit';
import { proveCode } from '#server/commands/checkCode';
import { findStub } from '#server/commands/findStub';
import { replayedBooking } from '#server/commands/replayedBooking';
import { AppError, fieldError } from '#server/errors';
import type { Ctx } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { limitStubLookups } from '#server/lib/rateLimits';
import { atShop, loadShop } from '#server/lib/shopContext';
import type { ShopProfile } from '#server/lib/shops';
import { presentFleet } from '#server/presenters/fleet';
import { freeDays } from '#server/queries/times';
import { may, rolesWith } from '#shared/policies/abilities';
import { BookBody, FindStubBody, type BookAnswer, type FindStubAnswer } from '#shared/schemas/booking';
import { TimesQuery, type TimesView } from '#shared/schemas/shop';
import { route, type Route } from './route';

export const bookingRoutes: Route[] = [
  route({
    method: 'get',
    path: '/api/shops/:shop/times',
    access: { public: 'a guest chooses a time before anybody knows him' },
    load: loadShop,
    query: TimesQuery,
    handle: async ({ ctx, row: shop, query }): Promise<TimesView> => ({
      now: ctx.now.toISOString(),
      zone: shop.zone,
      days: await withShop(shop.id, () => freeDays(shop, ctx.now, query.machines)),
    }),
  }),
  route({
    method: 'post',
    path: '/api/shops/:shop/bookings',
    access: { public: 'no account is needed the first time: the phone is proved by a code' },
    load: loadShop,
    body: BookBody,
    idempotent: true,
    status: 201,
    handle: ({ ctx, row: shop, body, headers }) => book(ctx, shop, body, String(headers['idempotency-key'])),
  }),
  route({
    method: 'post',
    path: '/api/shops/:shop/stubs',
    access: { public: 'the paper stub opens the page with the last four digits of a phone of the visit' },
    load: loadShop,
    body: FindStubBody,
    handle: async ({ ctx, row: shop, body }): Promise<FindStubAnswer> => {
      await limitStubLookups(ctx, shop.id, body.code);
      return { stubPath: await findStub(ctx, shop, body) };
    },
  }),
  route({
    method: 'get',
    path: '/api/fleet',
    access: { roles: rolesWith('fleet.view') },
    handle: ({ ctx }) => withShop(ctx.shopId, () => presentFleet(ctx)),
  }),
];

async function book(anyCtx: Ctx, shop: ShopProfile, body: BookBody, key: string): Promise<BookAnswer> {
  const here = atShop(anyCtx, shop);
  const ctx: Ctx = body.guest ? { ...here, actor: null } : here;
  if (!body.guest && !ctx.actor) throw new AppError('unauthenticated');
  if (!body.guest && !may(ctx.actor, 'book')) throw new AppError('forbidden');
  const replayed = await replayedBooking(ctx, body, key);
  if (replayed) return replayed;
  if (!body.guest) return bookVisit(ctx, { shop, body, key, proved: null });
  const proved = await proveCode(ctx, {
    requestId: body.guest.requestId,
    code: body.guest.code,
    purpose: 'book',
  });
  if (proved.phone !== body.guest.phone) throw fieldError('guest.phone', 'errors.field.phone_not_proved');
  return bookVisit(ctx, { shop, body, key, proved });
}
