import type { Ctx } from './context';
import { shopBySlug, type ShopProfile } from './shops';
import type { LoadInput } from '#server/routes/route';

/** Loads the shop that the address names. */
export const loadShop = ({ params }: LoadInput): Promise<ShopProfile> => shopBySlug(params.shop ?? '');

/** The context of an act in the shop that the address names; whoever is signed in elsewhere is nobody here. */
export function atShop(ctx: Ctx, shop: Pick<ShopProfile, 'id'>): Ctx {
  return { ...ctx, shopId: shop.id, actor: ctx.actor?.shopId === shop.id ? ctx.actor : null };
}
