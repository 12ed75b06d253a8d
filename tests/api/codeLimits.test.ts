/** What keeps one-time codes from being guessed, and texts from being pumped. */
import { afterAll, afterEach, beforeAll, describe, expect, test, vi } from 'vitest';
import { rows, withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { AuditEvent, LoginCode, ShopSettings } from '#server/models/index';
import { askCode, codeTexts } from '../support/codes';
import { makeShop, type TestShop } from '../support/factories';
import { newAddress, pass, startTestApp, type TestApp } from '../support/testApp';

const MINUTE = 60_000;
const HOUR = 60 * MINUTE;
const DAY = 24 * HOUR;

let app: TestApp;

beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.stop());
afterEach(() => {
  vi.useRealTimers();
});

const stopped = (shop: TestShop): Promise<AuditEvent[]> =>
  withShop(shop.id, () => AuditEvent.findAll({ where: { kind: ['codes_stopped', 'codes_near_budget'] } }));

describe('limits on codes', () => {
  test('three in ten minutes and six a day for one number, over all processes and shops', async () => {
    const [shop, other] = [await makeShop(app), await makeShop(app)];
    const second = await app.another();
    const { phone } = shop.manager;
    const start = Date.now();
    vi.useFakeTimers({ toFake: ['Date'], now: start });
    const statuses: number[] = [];
    const tryOnce = async (at: TestShop, express = app.express) => {
      const answer = await askCode({ express }, at, { phone });
      statuses.push(answer.status);
      return answer;
    };
    await tryOnce(shop);
    await tryOnce(shop, second);
    await tryOnce(other);
    const refused = await tryOnce(shop);
    expect(Number(refused.get('Retry-After'))).toBeGreaterThan(9 * 60);
    expect(refused.body).toMatchObject({ error: { code: 'too_many' } });

    vi.setSystemTime(start + 10 * MINUTE);
    for (let at = 0; at < 3; at += 1) await tryOnce(shop);
    vi.setSystemTime(start + 20 * MINUTE);
    const nextDay = await tryOnce(shop);
    expect(Number(nextDay.get('Retry-After'))).toBeGreaterThan(23 * 60 * 60);
    vi.setSystemTime(start + DAY);
    await tryOnce(shop);
    expect(statuses).toEqual([200, 200, 200, 429, 200, 200, 200, 429, 200]);
  });

  test('an unknown number is limited in the same words', async () => {
    const shop = await makeShop(app);
    const answers: object[] = [];
    for (const phone of [shop.manager.phone, shop.nextPhone()]) {
      for (let at = 0; at < 3; at += 1) await askCode(app, shop, { phone }).expect(200);
      const refused = await askCode(app, shop, { phone }).expect(429);
      answers.push({ ...(refused.body as { error: object }).error, requestId: undefined });
    }
    expect(answers[0]).toEqual(answers[1]);
  });

  test('ten an hour from one address', async () => {
    const shop = await makeShop(app);
    const address = newAddress();
    const statuses: number[] = [];
    for (let at = 0; at < 11; at += 1) {
      statuses.push((await askCode(app, shop, { phone: shop.nextPhone(), address })).status);
    }
    expect(statuses).toEqual([...Array<number>(10).fill(200), 429]);
  });

  test('twenty an hour over all numbers that differ in the last four digits', async () => {
    const shop = await makeShop(app);
    const statuses: number[] = [];
    for (let at = 0; at < 21; at += 1) {
      statuses.push((await askCode(app, shop, { phone: shop.nextPhone(), purpose: 'book' })).status);
    }
    expect(statuses).toEqual([...Array<number>(20).fill(200), 429]);
  });
});

describe('what a shop spends', () => {
  const setBudget = (shop: TestShop, codesPerDay: number) =>
    withShop(shop.id, () => ShopSettings.update({ codesPerDay }, { where: { shopId: shop.id } }));

  test('alarm at 80 %, a hard stop at the budget, open again as the day passes', async () => {
    const shop = await makeShop(app);
    await setBudget(shop, 5);
    const kinds = async () => (await stopped(shop)).map(({ kind }) => kind).sort();
    for (let at = 0; at < 3; at += 1) {
      await askCode(app, shop, { phone: shop.nextPhone(), purpose: 'book' }).expect(200);
    }
    expect(await kinds()).toEqual([]);
    await askCode(app, shop, { phone: shop.nextPhone(), purpose: 'book' }).expect(200);
    expect(await kinds()).toEqual(['codes_near_budget']);
    await askCode(app, shop, { phone: shop.nextPhone(), purpose: 'book' }).expect(200);

    // Whether the shop knows the phone does not show here either.
    const refused = [
      await askCode(app, shop, shop.manager),
      await askCode(app, shop, { phone: shop.nextPhone() }),
    ];
    expect(refused.map(({ status }) => status)).toEqual([429, 429]);
    expect(Number(refused[0]?.get('Retry-After'))).toBe(3600);
    expect(await codeTexts(shop)).toHaveLength(5);
    expect(await kinds()).toEqual(['codes_near_budget', 'codes_stopped']);

    const start = app.clock.now();
    pass(app, DAY);
    await askCode(app, shop, shop.crewLead).expect(200);
    app.clock.set(start);
  });

  test('codes that are not sent cost nothing', async () => {
    const shop = await makeShop(app);
    await setBudget(shop, 2);
    for (let at = 0; at < 5; at += 1) await askCode(app, shop, { phone: shop.nextPhone() }).expect(200);
    await askCode(app, shop, shop.manager).expect(200);
  });

  /** Fifty codes that went out half an hour ago, of which so many were used. */
  async function pastCodes(shop: TestShop, used: number): Promise<void> {
    const createdAt = new Date(app.clock.now().getTime() - 30 * MINUTE);
    await withShop(shop.id, async () => {
      for (let at = 0; at < 50; at += 1) {
        await LoginCode.create({
          shopId: shop.id,
          id: newId(),
          phone: shop.nextPhone(),
          purpose: 'book',
          codeHmac: 'sent',
          language: 'en',
          createdAt,
          expiresAt: new Date(createdAt.getTime() + 10 * MINUTE),
          usedAt: at < used ? createdAt : null,
        });
      }
    });
  }

  test('when fewer than 30 % of the last fifty were used, texts stop', async () => {
    const [pumped, busy] = [await makeShop(app), await makeShop(app)];
    await pastCodes(pumped, 14);
    await pastCodes(busy, 15);
    await askCode(app, pumped, pumped.manager).expect(429);
    await askCode(app, busy, busy.manager).expect(200);
    expect(await stopped(pumped)).toMatchObject([{ details: { reason: 'conversion' } }]);
    expect(await stopped(busy)).toEqual([]);
  });

  test('a script that asks for a thousand codes gets no more than the limits', async () => {
    const shop = await makeShop(app);
    await setBudget(shop, 60);
    const areas = [907, 808, 603, 802, 304, 501, 504, 405, 515, 601];
    const phones = areas.flatMap((area) =>
      Array.from({ length: 100 }, (_, at) => `+1${area}5550${100 + at}`),
    );
    const statuses: number[] = [];
    const worker = async () => {
      for (let phone = phones.shift(); phone; phone = phones.shift()) {
        statuses.push((await askCode(app, shop, { phone, purpose: 'book' })).status);
      }
    };
    await Promise.all(Array.from({ length: 20 }, worker));
    expect(statuses).toHaveLength(1000);
    expect(statuses.filter((status) => status !== 200 && status !== 429)).toEqual([]);
    expect(await codeTexts(shop)).toHaveLength(60);
    expect(statuses.filter((status) => status === 200)).toHaveLength(60);
  }, 180_000);
});

test('the table of limits shows neither addresses nor phones', async () => {
  const shop = await makeShop(app);
  const address = newAddress();
  await askCode(app, shop, { phone: shop.manager.phone, address }).expect(200);
  const keys = JSON.stringify(await rows('select key from rate_limits'));
  expect(keys).not.toContain(address);
  expect(keys).not.toContain((shop.manager.phone ?? '').slice(2));
});
