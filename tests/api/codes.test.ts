import { afterAll, afterEach, beforeAll, describe, expect, test, vi } from 'vitest';
import { proveCode, useCode } from '#server/commands/checkCode';
import { rows, withShop } from '#server/lib/db';
import { CODE_CHECKS, codeHmac, fitsCode } from '#server/lib/loginCodes';
import { newId } from '#server/lib/ids';
import { AuditEvent, LoginCode, Message, OptOut, Person, ShopSettings } from '#server/models/index';
import { addPerson, makeShop, type TestShop } from '../support/factories';
import { ctxOf, newAddress, pass, placeCode, startTestApp, visitor, type TestApp } from '../support/testApp';

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

interface Asked {
  phone: string | null;
  purpose?: 'book' | 'sign_in';
  address?: string;
}

function ask(shop: TestShop, { phone, purpose = 'sign_in', address }: Asked, express = app.express) {
  return visitor({ express }, address)
    .post(`/api/shops/${shop.slug}/codes`)
    .send({ phone, purpose, language: 'en' });
}

const sentTexts = (shop: TestShop): Promise<Message[]> =>
  withShop(shop.id, () => Message.findAll({ where: { kind: 'code' }, order: ['createdAt'] }));

/** The digits of the newest text, as the person reads them. */
async function readCode(shop: TestShop, phone: string | null): Promise<string> {
  const texts = (await sentTexts(shop)).filter((text) => text.toAddress === phone);
  return /\b\d{6}\b/.exec(texts.at(-1)?.body ?? '')?.[0] ?? '';
}

async function asked(shop: TestShop, given: Asked): Promise<{ requestId: string; code: string }> {
  const answer = await ask(shop, given).expect(200);
  const { requestId } = answer.body as { requestId: string };
  return { requestId, code: await readCode(shop, given.phone) };
}

const signIn = (shop: TestShop, body: object) =>
  visitor(app).post(`/api/shops/${shop.slug}/sign-in/code`).send(body);

const otherThan = (code: string, by = 1): string => String((Number(code) + by) % 1_000_000).padStart(6, '0');

const stopped = (shop: TestShop): Promise<AuditEvent[]> =>
  withShop(shop.id, () => AuditEvent.findAll({ where: { kind: ['codes_stopped', 'codes_near_budget'] } }));

describe('asking for a code', () => {
  test('texts six digits and keeps only what cannot be read back', async () => {
    const shop = await makeShop(app);
    const { requestId, code } = await asked(shop, shop.manager);
    expect(code).toMatch(/^\d{6}$/);
    const [kept] = await withShop(shop.id, () => LoginCode.findAll());
    expect(kept).toMatchObject({ id: requestId, phone: shop.manager.phone, purpose: 'sign_in', checks: 0 });
    expect(JSON.stringify(kept)).not.toContain(code);
    expect(kept?.expiresAt.getTime()).toBe(app.clock.now().getTime() + 10 * MINUTE);
  });

  test('a phone that the shop does not know is answered alike, and gets nothing', async () => {
    const shop = await makeShop(app);
    const known = await ask(shop, shop.manager).expect(200);
    const unknown = await ask(shop, { phone: shop.nextPhone() }).expect(200);
    const staff = await ask(shop, shop.staff.owner).expect(200);
    for (const answer of [unknown, staff]) {
      expect(Object.keys(answer.body as object).sort()).toEqual(['expiresAt', 'requestId']);
      expect(answer.body).toMatchObject({ expiresAt: (known.body as { expiresAt: string }).expiresAt });
    }
    expect((await sentTexts(shop)).map((text) => text.toAddress)).toEqual([shop.manager.phone]);

    const { requestId } = unknown.body as { requestId: string };
    const guess = await signIn(shop, { requestId, code: '000000' });
    expect(guess.status).toBe(400);
    expect(guess.body).toMatchObject({ error: { code: 'code_wrong' } });
    for (let at = 0; at < 4; at += 1) await signIn(shop, { requestId, code: '000000' }).expect(400);
    expect((await signIn(shop, { requestId, code: '000000' })).body).toMatchObject({
      error: { code: 'code_expired' },
    });
  });

  test('the answer about an unknown phone takes no less time', async () => {
    const shop = await makeShop(app);
    for (const phone of [shop.manager.phone, shop.nextPhone()]) {
      const start = performance.now();
      await ask(shop, { phone }).expect(200);
      expect(performance.now() - start).toBeGreaterThan(58);
    }
  });

  test('to book, an unknown phone gets one', async () => {
    const shop = await makeShop(app);
    const { code } = await asked(shop, { phone: shop.nextPhone(), purpose: 'book' });
    expect(code).toMatch(/^\d{6}$/);
  });

  test('a phone that sent STOP is told how to go on', async () => {
    const shop = await makeShop(app);
    const phone = shop.manager.phone ?? '';
    await withShop(shop.id, () =>
      OptOut.create({
        shopId: shop.id,
        id: newId(),
        phone,
        optedOut: true,
        source: 'text',
        at: app.clock.now(),
      }),
    );
    const answer = await ask(shop, { phone }).expect(409);
    expect(answer.body).toMatchObject({
      error: {
        code: 'opted_out',
        details: { shopPhone: shop.settings.phone, shopNumberToText: shop.sender },
      },
    });
    expect(await sentTexts(shop)).toEqual([]);
    await withShop(shop.id, () => OptOut.update({ optedOut: false }, { where: { phone } }));
    await ask(shop, { phone }).expect(200);
  });

  test.each([
    [{ phone: '', purpose: 'sign_in', language: 'en' }, ['phone']],
    [{ phone: '911', purpose: 'sign_in', language: 'en' }, ['phone']],
    [{ phone: '+44 20 7946 0018', purpose: 'sign_in', language: 'en' }, ['phone']],
    [{ phone: '303 555 0142', purpose: 'admin', language: 'xx' }, ['language', 'purpose']],
    [{ phone: '303 555 0142', purpose: 'book', language: 'en', code: '123456' }, ['code']],
  ])('a wrong form %j is answered by field', async (body, fields) => {
    const shop = await makeShop(app);
    const answer = await visitor(app).post(`/api/shops/${shop.slug}/codes`).send(body).expect(400);
    const { error } = answer.body as { error: { fields: { path: string }[] } };
    expect(error.fields.map(({ path }) => path).sort()).toEqual(fields);
  });
});

describe('signing in by a code', () => {
  test('works once, and stamps the phone as proved', async () => {
    const shop = await makeShop(app);
    const proof = await asked(shop, shop.manager);
    const answer = await signIn(shop, proof).expect(200);
    expect(answer.body).toMatchObject({ person: { id: shop.manager.id, roles: ['manager'] } });
    const person = await withShop(shop.id, () => Person.findByPk(shop.manager.id));
    expect(person).toMatchObject({ phoneProvedAt: app.clock.now(), lastActedAt: app.clock.now() });
    expect((await signIn(shop, proof).expect(400)).body).toMatchObject({ error: { code: 'code_expired' } });
  });

  test('of two simultaneous uses one signs in', async () => {
    const shop = await makeShop(app);
    const proof = await placeCode(app, shop.manager, 'sign_in');
    const answers = await Promise.all([signIn(shop, proof), signIn(shop, proof), signIn(shop, proof)]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 400, 400]);
  });

  test('ten minutes, and not a moment longer', async () => {
    const shop = await makeShop(app);
    const inTime = await placeCode(app, shop.manager, 'sign_in');
    const late = await placeCode(app, shop.manager, 'sign_in');
    pass(app, 10 * MINUTE - 1);
    await signIn(shop, inTime).expect(200);
    pass(app, 1);
    expect((await signIn(shop, late).expect(400)).body).toMatchObject({ error: { code: 'code_expired' } });
  });

  test('a new code kills the old one', async () => {
    const shop = await makeShop(app);
    const old = await asked(shop, shop.manager);
    pass(app, 1000);
    const fresh = await asked(shop, shop.manager);
    expect((await signIn(shop, old).expect(400)).body).toMatchObject({ error: { code: 'code_expired' } });
    await signIn(shop, fresh).expect(200);
  });

  test('is bound to its request, its purpose and its shop', async () => {
    const [shop, other] = [await makeShop(app), await makeShop(app)];
    const one = await placeCode(app, shop.manager, 'sign_in');
    const two = await placeCode(app, shop.crewLead, 'sign_in');
    const booking = await placeCode(app, shop.manager, 'book');
    const crossed = { requestId: two.requestId, code: one.code };
    if (one.code !== two.code) await signIn(shop, crossed).expect(400);
    await signIn(shop, booking).expect(400);
    await signIn(other, one).expect(400);
    await signIn(shop, one).expect(200);
  });

  test('five checks, however many come at once; then the right code is worth nothing', async () => {
    const shop = await makeShop(app);
    const proof = await placeCode(app, shop.manager, 'sign_in');
    const guesses = await Promise.all(
      Array.from({ length: 30 }, (_, at) => signIn(shop, { ...proof, code: otherThan(proof.code, at + 1) })),
    );
    const codes = guesses.map(({ body }) => (body as { error: { code: string } }).error.code);
    expect(codes.filter((code) => code === 'code_wrong')).toHaveLength(CODE_CHECKS);
    expect(codes.filter((code) => code === 'code_expired')).toHaveLength(30 - CODE_CHECKS);
    await signIn(shop, proof).expect(400);
  });

  test('of a million guesses one fits, so five have a chance below one in 100,000', () => {
    const key = app.env.CODE_KEY;
    const requestId = newId();
    const kept = codeHmac(key, requestId, '493027');
    let fits = 0;
    for (let guess = 0; guess < 1_000_000; guess += 1) {
      if (fitsCode(kept, codeHmac(key, requestId, String(guess).padStart(6, '0')))) fits += 1;
    }
    expect(fits).toBe(1);
    expect((CODE_CHECKS * fits) / 1_000_000).toBeLessThan(1e-5);
  }, 60_000);

  test('people who share a phone are asked which of them it is, and the code stays good', async () => {
    const shop = await makeShop(app);
    const { phone, accountId } = shop.manager;
    const sister = await withShop(shop.id, () =>
      addPerson(app, shop.id, ['crew_lead'], { name: 'Sister', phone, accountId, crewId: shop.crew.id }),
    );
    const stranger = shop.bookkeeper;
    const proof = await placeCode(app, shop.manager, 'sign_in');
    const first = await signIn(shop, proof).expect(409);
    expect(first.body).toMatchObject({
      error: {
        code: 'which_person',
        details: {
          people: expect.arrayContaining([
            { id: shop.manager.id, name: shop.manager.name, account: shop.account.name },
            { id: sister.id, name: 'Sister', account: shop.account.name },
          ]) as unknown,
        },
      },
    });
    await signIn(shop, { ...proof, personId: stranger.id }).expect(409);
    const chosen = await signIn(shop, { ...proof, personId: sister.id }).expect(200);
    expect(chosen.body).toMatchObject({ person: { id: sister.id } });
  });

  test.each([
    [{ requestId: 'x', code: '123456' }, ['requestId']],
    [{ requestId: '11111111-1111-4111-8111-111111111111', code: '12345' }, ['code']],
    [{}, ['code', 'requestId']],
  ])('a wrong form %j is answered by field', async (body, fields) => {
    const shop = await makeShop(app);
    const answer = await signIn(shop, body).expect(400);
    const { error } = answer.body as { error: { fields: { path: string }[] } };
    expect(error.fields.map(({ path }) => path).sort()).toEqual(fields);
  });

  test('a request that never was is answered like one that has run out', async () => {
    const shop = await makeShop(app);
    const answer = await signIn(shop, { requestId: newId(), code: '123456' }).expect(400);
    expect(answer.body).toMatchObject({ error: { code: 'code_expired' } });
  });
});

describe('proving a phone to book', () => {
  test('a right code stays good until a booking uses it, and then proves nothing new', async () => {
    const shop = await makeShop(app);
    const ctx = ctxOf(app, shop.id);
    const phone = shop.nextPhone();
    const proof = { ...(await placeCode(app, { shopId: shop.id, phone }, 'book')), purpose: 'book' as const };
    for (let tries = 0; tries < 7; tries += 1) {
      expect(await proveCode(ctx, proof)).toMatchObject({ phone, requestId: proof.requestId });
    }
    // The booking whose time was just taken: its unit of work is undone, the use of the code with it.
    const failed = withShop(shop.id, async () => {
      await useCode(ctx, proof.requestId);
      throw new Error('full');
    });
    await expect(failed).rejects.toThrow('full');
    await withShop(shop.id, () => useCode(ctx, proof.requestId));
    await proveCode(ctx, proof);
    const again = withShop(shop.id, () => useCode(ctx, proof.requestId));
    await expect(again).rejects.toMatchObject({ code: 'code_expired' });
  });

  test('wrong tries count although nothing is booked', async () => {
    const shop = await makeShop(app);
    const ctx = ctxOf(app, shop.id);
    const proof = await placeCode(app, { shopId: shop.id, phone: shop.nextPhone() }, 'book');
    const attempt = (code: string) => proveCode(ctx, { ...proof, code, purpose: 'book' });
    for (let tries = 0; tries < CODE_CHECKS; tries += 1) {
      await expect(attempt(otherThan(proof.code))).rejects.toMatchObject({ code: 'code_wrong' });
    }
    await expect(attempt(proof.code)).rejects.toMatchObject({ code: 'code_expired' });
  });
});

describe('limits on codes', () => {
  test('three in ten minutes and six a day for one number, over all processes and shops', async () => {
    const [shop, other] = [await makeShop(app), await makeShop(app)];
    const second = await app.another();
    const { phone } = shop.manager;
    const start = Date.now();
    vi.useFakeTimers({ toFake: ['Date'], now: start });
    const statuses: number[] = [];
    const tryOnce = async (at: TestShop, express = app.express) => {
      const answer = await ask(at, { phone }, express);
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
      for (let at = 0; at < 3; at += 1) await ask(shop, { phone }).expect(200);
      const refused = await ask(shop, { phone }).expect(429);
      answers.push({ ...(refused.body as { error: object }).error, requestId: undefined });
    }
    expect(answers[0]).toEqual(answers[1]);
  });

  test('ten an hour from one address', async () => {
    const shop = await makeShop(app);
    const address = newAddress();
    const statuses: number[] = [];
    for (let at = 0; at < 11; at += 1) {
      statuses.push((await ask(shop, { phone: shop.nextPhone(), address })).status);
    }
    expect(statuses).toEqual([...Array<number>(10).fill(200), 429]);
  });

  test('twenty an hour over all numbers that differ in the last four digits', async () => {
    const shop = await makeShop(app);
    const statuses: number[] = [];
    for (let at = 0; at < 21; at += 1) {
      statuses.push((await ask(shop, { phone: shop.nextPhone(), purpose: 'book' })).status);
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
      await ask(shop, { phone: shop.nextPhone(), purpose: 'book' }).expect(200);
    }
    expect(await kinds()).toEqual([]);
    await ask(shop, { phone: shop.nextPhone(), purpose: 'book' }).expect(200);
    expect(await kinds()).toEqual(['codes_near_budget']);
    await ask(shop, { phone: shop.nextPhone(), purpose: 'book' }).expect(200);

    // Whether the shop knows the phone does not show here either.
    const refused = [await ask(shop, shop.manager), await ask(shop, { phone: shop.nextPhone() })];
    expect(refused.map(({ status }) => status)).toEqual([429, 429]);
    expect(Number(refused[0]?.get('Retry-After'))).toBe(3600);
    expect(await sentTexts(shop)).toHaveLength(5);
    expect(await kinds()).toEqual(['codes_near_budget', 'codes_stopped']);

    const start = app.clock.now();
    pass(app, DAY);
    await ask(shop, shop.crewLead).expect(200);
    app.clock.set(start);
  });

  test('codes that are not sent cost nothing', async () => {
    const shop = await makeShop(app);
    await setBudget(shop, 2);
    for (let at = 0; at < 5; at += 1) await ask(shop, { phone: shop.nextPhone() }).expect(200);
    await ask(shop, shop.manager).expect(200);
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
    await ask(pumped, pumped.manager).expect(429);
    await ask(busy, busy.manager).expect(200);
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
        statuses.push((await ask(shop, { phone, purpose: 'book' })).status);
      }
    };
    await Promise.all(Array.from({ length: 20 }, worker));
    expect(statuses).toHaveLength(1000);
    expect(statuses.filter((status) => status !== 200 && status !== 429)).toEqual([]);
    expect(await sentTexts(shop)).toHaveLength(60);
    expect(statuses.filter((status) => status === 200)).toHaveLength(60);
  }, 180_000);
});

test('the table of limits shows neither addresses nor phones', async () => {
  const shop = await makeShop(app);
  const address = newAddress();
  await ask(shop, { phone: shop.manager.phone, address }).expect(200);
  const keys = JSON.stringify(await rows('select key from rate_limits'));
  expect(keys).not.toContain(address);
  expect(keys).not.toContain((shop.manager.phone ?? '').slice(2));
});
