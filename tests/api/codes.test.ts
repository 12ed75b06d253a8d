/** One-time codes: asked for, checked, used up. */
import { afterAll, afterEach, beforeAll, describe, expect, test, vi } from 'vitest';
import { proveCode, useCode } from '#server/commands/checkCode';
import { withShop } from '#server/lib/db';
import { CODE_CHECKS, codeHmac, fitsCode } from '#server/lib/loginCodes';
import { newId } from '#server/lib/ids';
import { LoginCode, OptOut, Person } from '#server/models/index';
import { askCode, askedCode, codeTexts } from '../support/codes';
import { addPerson, makeShop, type TestShop } from '../support/factories';
import { ctxOf, pass, placeCode, startTestApp, visitor, type TestApp } from '../support/testApp';

const MINUTE = 60_000;

let app: TestApp;

beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.stop());
afterEach(() => {
  vi.useRealTimers();
});

const signIn = (shop: TestShop, body: object) =>
  visitor(app).post(`/api/shops/${shop.slug}/sign-in/code`).send(body);

const otherThan = (code: string, by = 1): string => String((Number(code) + by) % 1_000_000).padStart(6, '0');

describe('asking for a code', () => {
  test('texts six digits and keeps only what cannot be read back', async () => {
    const shop = await makeShop(app);
    const { requestId, code } = await askedCode(app, shop, shop.manager);
    expect(code).toMatch(/^\d{6}$/);
    const [kept] = await withShop(shop.id, () => LoginCode.findAll());
    expect(kept).toMatchObject({ id: requestId, phone: shop.manager.phone, purpose: 'sign_in', checks: 0 });
    expect(JSON.stringify(kept)).not.toContain(code);
    expect(kept?.expiresAt.getTime()).toBe(app.clock.now().getTime() + 10 * MINUTE);
  });

  test('a phone that the shop does not know is answered alike, and gets nothing', async () => {
    const shop = await makeShop(app);
    const known = await askCode(app, shop, shop.manager).expect(200);
    const unknown = await askCode(app, shop, { phone: shop.nextPhone() }).expect(200);
    const staff = await askCode(app, shop, shop.staff.owner).expect(200);
    for (const answer of [unknown, staff]) {
      expect(Object.keys(answer.body as object).sort()).toEqual(['expiresAt', 'requestId']);
      expect(answer.body).toMatchObject({ expiresAt: (known.body as { expiresAt: string }).expiresAt });
    }
    expect((await codeTexts(shop)).map((text) => text.toAddress)).toEqual([shop.manager.phone]);

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
      await askCode(app, shop, { phone }).expect(200);
      expect(performance.now() - start).toBeGreaterThan(58);
    }
  });

  test('to book, an unknown phone gets one', async () => {
    const shop = await makeShop(app);
    const { code } = await askedCode(app, shop, { phone: shop.nextPhone(), purpose: 'book' });
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
    const answer = await askCode(app, shop, { phone }).expect(409);
    expect(answer.body).toMatchObject({
      error: {
        code: 'opted_out',
        details: { shopPhone: shop.settings.phone, shopNumberToText: shop.sender },
      },
    });
    expect(await codeTexts(shop)).toEqual([]);
    await withShop(shop.id, () => OptOut.update({ optedOut: false }, { where: { phone } }));
    await askCode(app, shop, { phone }).expect(200);
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
    const proof = await askedCode(app, shop, shop.manager);
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
    const old = await askedCode(app, shop, shop.manager);
    pass(app, 1000);
    const fresh = await askedCode(app, shop, shop.manager);
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
