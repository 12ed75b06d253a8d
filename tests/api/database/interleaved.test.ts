import { afterAll, beforeAll, expect, it } from 'vitest';
import { db, withShop } from '#server/lib/db';
import { runInterleaved } from '../../support/interleaved';
import {
  openShopDatabase,
  ownerRows,
  plainShop,
  type PlainShop,
  type ShopDatabase,
} from '../../support/shopDatabase';

let base: ShopDatabase;
const shops: PlainShop[] = [];

beforeAll(async () => {
  base = await openShopDatabase({ pool: 10 });
  for (let at = 0; at < 50; at += 1) shops.push(await plainShop(base, `shop-${at}`, 3));
});
afterAll(() => base.close());

it('1,000 units of 50 shops over ten connections never see each other', async () => {
  const result = await runInterleaved({ shops, units: 1000, unit: withShop });
  expect(result.foreign).toEqual([]);
  expect([result.done, result.thrown]).toEqual([950, 50]);
  // 3 machines, 3 jobs with visit and machine, 2 visits with a job, 1 job with its machine, 1 person.
  expect(result.rowsRead).toBe(1000 * (3 + 9 + 4 + 2 + 1));
});

it('leave what a finished unit wrote, and nothing of a thrown one', async () => {
  const written = await ownerRows<{ name: string; shop: string }>(
    base,
    'select name, shop_id as shop from accounts',
  );
  expect(written).toHaveLength(50);
  expect(written.filter(({ name, shop }) => name !== `of ${shop}`)).toEqual([]);
});

it('the same load sees foreign rows where the shop is set on the connection instead of in a transaction', async () => {
  const leaky = async (shopId: string, act: () => Promise<void>) => {
    await db().query("select set_config('app.shop', $1, false)", { bind: [shopId] });
    // A connection of the pool that nobody has set yet refuses, as it should.
    await act().catch(() => undefined);
  };
  const { foreign } = await runInterleaved({ shops, units: 100, unit: leaky });
  expect(foreign.length).toBeGreaterThan(0);
});
