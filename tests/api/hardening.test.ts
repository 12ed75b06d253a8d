/** What somebody tries who means harm: each of these once had an answer that it should not have. */
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { LIMITS } from '#server/lib/rateLimits';
import { makeShop, type TestShop } from '../support/factories';
import { bookJob, bringTo, errorOf, faultsOf, met, postMove, sheetOf } from '../support/jobs';
import { signedIn, startTestApp, visitor, type Client, type TestApp } from '../support/testApp';

let app: TestApp;
let shop: TestShop;
let owner: Client;

beforeAll(async () => {
  app = await startTestApp();
  shop = await makeShop(app);
  owner = await signedIn(app, shop, shop.staff.owner);
});
afterAll(() => app.stop());

describe('limits by address', () => {
  /** One household has a /64 of the newer protocol to itself, so each request can come from a new address. */
  const households = (n: number): string => `2001:db8:${n.toString(16)}:7::`;
  const lookUp = (address: string, code: string) =>
    visitor(app, address).post(`/api/shops/${shop.slug}/stubs`).send({ code, lastFour: '0100' });

  test('hold for all addresses of one household, and not for the next one', async () => {
    const statuses: number[] = [];
    for (let at = 1; at <= LIMITS.stubAddress.points + 1; at += 1) {
      statuses.push((await lookUp(`${households(1)}${at.toString(16)}`, `guess${at}`)).status);
    }
    expect(statuses.lastIndexOf(404)).toBe(LIMITS.stubAddress.points - 1);
    expect(statuses.at(-1)).toBe(429);
    expect((await lookUp(`${households(2)}1`, 'guess0')).status).toBe(404);
  });

  test('and so do those on codes, which cost money', async () => {
    const statuses: number[] = [];
    for (let at = 1; at <= LIMITS.codeAddress.points + 1; at += 1) {
      const client = visitor(app, `${households(3)}${at.toString(16)}`);
      const body = { phone: shop.nextPhone(), purpose: 'sign_in', language: 'en' };
      statuses.push((await client.post(`/api/shops/${shop.slug}/codes`).send(body)).status);
    }
    expect(statuses.lastIndexOf(200)).toBe(LIMITS.codeAddress.points - 1);
    expect(statuses.at(-1)).toBe(429);
  });
});

describe('the log', () => {
  test('names a statement that failed, and none of the values that it was given', async () => {
    await app.owner.query("alter table messages add constraint no_codes check (kind <> 'code') not valid");
    const before = app.log.length;
    const phone = shop.nextPhone();
    const answer = await visitor(app)
      .post(`/api/shops/${shop.slug}/codes`)
      .send({ phone, purpose: 'book', language: 'en' });
    await app.owner.query('alter table messages drop constraint no_codes');
    expect(answer.status).toBe(500);
    const log = app.log.slice(before).join('');
    expect(log).toContain('no_codes');
    expect(log).toContain('askCode');
    expect(log).not.toContain(phone);
    expect(log).not.toMatch(/parameters|"sql"/);
  });
});

describe('a body that cannot be read', () => {
  const broken = (client: Client, path: string) =>
    client
      .post(path)
      .set('Content-Type', 'application/json')
      .set('Idempotency-Key', 'key-12345678')
      .send('{"a":');

  test('is spoken of to nobody before it is known who calls, what about, and whether he may', async () => {
    const { tag } = await bookJob(app, shop);
    const manager = await signedIn(app, shop, shop.manager);
    expect((await broken(visitor(app), `/api/shop/jobs/${tag}/moves`)).status).toBe(401);
    expect((await broken(owner, '/api/shop/jobs/ABCDEF/moves')).status).toBe(404);
    expect((await broken(manager, `/api/shop/jobs/${tag}/moves`)).status).toBe(403);
    expect((await broken(owner, '/api/nowhere')).status).toBe(404);
    const answer = await broken(owner, `/api/shop/jobs/${tag}/moves`);
    expect([answer.status, errorOf(answer).code]).toEqual([400, 'invalid']);
  });

  test.each([
    ['too many fields', 'a=1&'.repeat(2000)],
    ['too long', `a=${'b'.repeat(200_000)}`],
  ])('of a webhook, %s, is no fault of ours', async (_what, form) => {
    const answer = await visitor(app).post('/hooks/sms/inbound').type('form').send(form);
    expect(answer.status).toBe(400);
  });
});

describe('secret addresses', () => {
  test.each([
    '/t/abcdefghijklmnopqrstuv',
    '/T/abcdefghijklmnopqrstuv',
    '/API/T/abcdefghijklmnopqrstuv',
    '/u/abcdefghijklmnopqrstuv',
    '/s/quarrel-lane/password/abcdefghijklmnopqrstuv',
    '/api/shops/quarrel-lane/password-links/abcdefghijklmnopqrstuv',
  ])('%s is neither indexed nor kept, however it is written', async (path) => {
    const { headers } = await visitor(app).get(path);
    expect(headers).toMatchObject({ 'x-robots-tag': 'noindex, nofollow', 'cache-control': 'no-store' });
  });
});

describe('a move', () => {
  test('rewrites nothing that was written down at the gate', async () => {
    const { tag } = await bookJob(app, shop);
    await bringTo(owner, tag, 'checked_in');
    const checkIn = { broughtByName: 'Mallory', tankBled: true, fuelOff: true, leftWithIt: '' };
    const answer = await postMove(owner, tag, 'diagnosis', { checkIn, lines: [met('walk_round')] });
    expect([answer.status, faultsOf(answer)]).toEqual([400, ['checkIn']]);
    expect((await sheetOf(owner, tag)).job.broughtBy).toBe('Ray');
  });

  test('is signed by words that can be read', async () => {
    const { tag } = await bookJob(app, shop);
    await bringTo(owner, tag, 'checked_in');
    const answer = await postMove(owner, tag, 'diagnosis', { lines: [met('walk_round', { how: '\u200b' })] });
    expect([answer.status, faultsOf(answer)]).toEqual([400, ['lines.0.how']]);
  });
});
