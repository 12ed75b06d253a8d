import { afterAll, beforeAll, expect, it } from 'vitest';
import { withShop } from '#server/lib/db';
import { runInterleaved } from '../support/interleaved';
import {
  openShopDatabase,
  ownerRows,
  plainShop,
  type PlainShop,
  type ShopDatabase,
} from '../support/shopDatabase';

let base: ShopDatabase;
const shops: PlainShop[] = [];

beforeAll(async () => {
  base = await openShopDatabase({ pool: 10 });
  for (let at = 0; at < 50; at += 1) shops.push(await plainShop(base, `shop-${at}`, 3));
});
afterAll(() => base.close());

it('10,000 units of 50 shops over ten connections, one in twenty thrown, never see each other', async () => {
  const { foreign, done, thrown } = await runInterleaved({ shops, units: 10_000, unit: withShop });
  expect(foreign).toEqual([]);
  expect([done, thrown]).toEqual([9500, 500]);
  const written = await ownerRows<{ name: string; shop: string }>(
    base,
    'select name, shop_id as shop from accounts',
  );
  expect(written.filter(({ name, shop }) => name !== `of ${shop}`)).toEqual([]);
});
