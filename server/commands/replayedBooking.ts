import { keyedBooking, withStubPath, type KeptBooking } from './bookVisit';
import type { Ctx } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { answered } from '#server/lib/idempotency';
import type { BookAnswer, BookBody } from '#shared/schemas/booking';

/**
 * The answer of a booking already made under this key. Asked before the code is looked at: the code of a booking
 * whose answer got lost is used up.
 */
export async function replayedBooking(ctx: Ctx, body: BookBody, key: string): Promise<BookAnswer | null> {
  const kept = await withShop(ctx.shopId, () => answered<KeptBooking>(ctx, keyedBooking(body, key)));
  return kept && withStubPath(ctx, kept);
}
