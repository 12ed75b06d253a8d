import { askCode } from '#server/commands/askCode';
import { atShop, loadShop } from '#server/lib/shopContext';
import { AskCodeBody } from '#shared/schemas/session';
import { route, type Route } from './route';

/** One-time codes by text. */
export const codeRoutes: Route[] = [
  route({
    method: 'post',
    path: '/api/shops/:shop/codes',
    access: { public: 'a phone is proved before anybody is signed in; limited by number, address and shop' },
    load: loadShop,
    body: AskCodeBody,
    handle: ({ ctx, row: shop, body }) => askCode(atShop(ctx, shop), shop, body),
  }),
];
