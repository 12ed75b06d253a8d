import { withShop } from '#server/lib/db';
import { loadShop } from '#server/lib/shopContext';
import { presentShop } from '#server/presenters/shop';
import { route, type Route } from './route';

/** What a shop shows to everybody. */
export const shopRoutes: Route[] = [
  route({
    method: 'get',
    path: '/api/shops/:shop',
    access: { public: 'hours, address and what can be booked, as on the shop’s door' },
    load: loadShop,
    handle: ({ ctx, row: shop }) => withShop(shop.id, () => presentShop(ctx, shop)),
  }),
];
