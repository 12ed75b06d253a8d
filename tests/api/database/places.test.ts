import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { givePlaceBack, halfDayOf, retakePlace, takePlaces } from '#server/commands/places';
import { constraintOf, run, withShop } from '#server/lib/db';
import { openNewShop } from '#server/lib/newShop';
import { unitShopOf } from '#server/lib/shops';
import { HalfDay, HalfDayEvent } from '#server/models/index';
import { ctxOf, openShopDatabase, type PlainShop, type ShopDatabase } from '../../support/shopDatabase';

const PLACES = 5;
let base: ShopDatabase;
let shop: PlainShop;

beforeAll(async () => {
  base = await openShopDatabase();
  const id = await openNewShop(base.owner, {
    slug: 'flint-street',
    name: 'Flint Street Repairs',
    textName: 'Flint Street',
    zone: 'America/Denver',
    phone: '+13035550100',
    sender: '+13035550101',
    email: 'shop@example.com',
    address: '1 Flint Street',
    placesPerHalfDay: PLACES,
  });
  shop = { id, accountId: id, personId: id, jobIds: [] };
});
afterAll(() => base.close());

/** Arrival times of days of their own, so that no case meets another's half-day. */
const at = (day: string, utc = '16:00') => new Date(`${day}T${utc}:00Z`);
const take = (arrives: Date, count = 1) =>
  withShop(shop.id, async () => takePlaces(ctxOf(shop), await unitShopOf(shop.id), arrives, count));
const halfDay = (day: string, half = 'am') =>
  withShop(shop.id, () => HalfDay.findOne({ where: { day, half }, rejectOnEmpty: true }));
const takenOf = async (tries: Promise<unknown>[]) => {
  const results = await Promise.allSettled(tries);
  const refusals = results.flatMap((result) =>
    result.status === 'rejected' ? [result.reason as unknown] : [],
  );
  return { taken: results.length - refusals.length, refusals };
};

describe('taking places', () => {
  it('gives fifty who come at once exactly the five there are, and tells the rest what is free', async () => {
    const arrives = at('2026-12-07');
    const { taken, refusals } = await takenOf(Array.from({ length: 50 }, () => take(arrives)));
    expect(taken).toBe(PLACES);
    expect((await halfDay('2026-12-07')).taken).toBe(PLACES);
    for (const refusal of refusals) {
      expect(refusal).toMatchObject({ code: 'times_full', status: 409, details: { half: 'am' } });
    }
    const { next } = (refusals[0] as { details: { next: string[] } }).details;
    expect(next).toHaveLength(6);
    expect(next.filter((time) => time.startsWith('2026-12-07') && Number(time.slice(11, 13)) < 12)).toEqual(
      [],
    );
  });

  it('takes all of a visit’s places or none, also in a crowd', async () => {
    const { taken } = await takenOf(Array.from({ length: 20 }, () => take(at('2026-12-08'), 2)));
    expect([taken, (await halfDay('2026-12-08')).taken]).toEqual([2, 4]);
    await take(at('2026-12-08'), 1);
    expect((await halfDay('2026-12-08')).taken).toBe(PLACES);
  });

  it('refuses more than a half-day ever has, and takes nothing', async () => {
    await expect(take(at('2026-12-09'), PLACES + 1)).rejects.toMatchObject({ code: 'times_full' });
    await take(at('2026-12-09'), PLACES);
  });

  it('parts the half-days at noon of the shop', async () => {
    await take(at('2026-12-10', '18:59'), PLACES);
    await take(at('2026-12-10', '19:00'), 2);
    expect([(await halfDay('2026-12-10', 'am')).taken, (await halfDay('2026-12-10', 'pm')).taken]).toEqual([
      5, 2,
    ]);
  });

  it('is taken back with the unit it belongs to', async () => {
    const broken = withShop(shop.id, async () => {
      await takePlaces(ctxOf(shop), await unitShopOf(shop.id), at('2026-12-11'), PLACES);
      throw new Error('no such machine');
    });
    await expect(broken).rejects.toThrow('no such machine');
    await take(at('2026-12-11'), PLACES);
  });
});

describe('the half-day of an instant', () => {
  // Noon of Denver: 18:00Z in summer, 19:00Z in winter; the clock goes back on 1 November at 08:00Z.
  it.each([
    ['2026-10-31T17:59:59Z', '2026-10-31', 'am'],
    ['2026-10-31T18:00:00Z', '2026-10-31', 'pm'],
    ['2026-11-01T18:59:59Z', '2026-11-01', 'am'],
    ['2026-11-01T19:00:00Z', '2026-11-01', 'pm'],
    ['2026-11-02T06:59:59Z', '2026-11-01', 'pm'],
    ['2026-11-02T07:00:00Z', '2026-11-02', 'am'],
  ])('%s is %s %s', (instant, day, half) => {
    expect(halfDayOf(new Date(instant), 'America/Denver')).toEqual({ day, half });
  });
});

describe('the table itself', () => {
  it.each(['taken = 6', 'taken = -1', 'places = 4, taken = 5', 'over = -1'])(
    'refuses what would be a place too many or too few: %s',
    async (change) => {
      const id = await take(at('2026-12-14')).catch(async () => (await halfDay('2026-12-14')).id);
      const act = withShop(shop.id, () => run(`update half_days set ${change} where id = $1`, [id]));
      const constraint = await act.then(() => 'none', constraintOf);
      expect(['half_days_no_overbooking', 'half_days_over_check']).toContain(constraint);
    },
  );
});

describe('a place given back', () => {
  it('is free for the next one', async () => {
    const id = await take(at('2026-12-15'), PLACES);
    await withShop(shop.id, () => givePlaceBack(id));
    await take(at('2026-12-15'));
    await expect(take(at('2026-12-15'))).rejects.toMatchObject({ code: 'times_full' });
  });

  const retake = (id: string) => withShop(shop.id, () => retakePlace(ctxOf(shop), id, 'a cancel was undone'));
  const eventsOf = (halfDayId: string) =>
    withShop(shop.id, () => HalfDayEvent.findAll({ where: { halfDayId } }));

  it('and taken again while it is free is nothing to tell', async () => {
    const id = await take(at('2026-12-16'), PLACES);
    await withShop(shop.id, () => givePlaceBack(id));
    await retake(id);
    expect(await halfDay('2026-12-16')).toMatchObject({ taken: PLACES, over: 0 });
    expect(await eventsOf(id)).toEqual([]);
  });

  it('and taken again when it is gone makes the half-day hold one more, as an event', async () => {
    const id = await take(at('2026-12-17'), PLACES);
    await retake(id);
    expect(await halfDay('2026-12-17')).toMatchObject({ places: PLACES, taken: 6, over: 1 });
    const event = { kind: 'over_raised', places: 1, reason: 'a cancel was undone', byName: 'Dana Ruiz' };
    expect(await eventsOf(id)).toMatchObject([event]);
    await expect(take(at('2026-12-17'))).rejects.toMatchObject({ code: 'times_full' });
  });

  it('and taken again by several at once is counted for each', async () => {
    const id = await take(at('2026-12-18'), PLACES);
    await Promise.all([retake(id), retake(id), retake(id)]);
    expect(await halfDay('2026-12-18')).toMatchObject({ taken: 8, over: 3 });
    expect((await eventsOf(id)).map(({ places }) => places)).toEqual([1, 1, 1]);
  });
});
