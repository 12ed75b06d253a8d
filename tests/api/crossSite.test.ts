import supertest from 'supertest';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { newAddress, startTestApp, type TestApp } from '../support/testApp';

let app: TestApp;
const OWN = 'http://127.0.0.1:5180';
const EVIL = 'https://evil.example.com';

beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.stop());

type Headers = Record<string, string>;

/** Sign-out changes something, needs nobody and no body: what stops it is the check alone. */
async function post(headers: Headers, body?: string, path = '/api/sign-out'): Promise<number> {
  const request = supertest(app.express)
    .post(path)
    .set({ 'X-Forwarded-For': newAddress(), ...headers });
  return (body === undefined ? await request : await request.send(body)).status;
}

const JSON_TYPE = { 'Content-Type': 'application/json' };

describe('Sec-Fetch-Site decides where it is there, whatever Origin says', () => {
  test.each([
    ['same-origin', OWN, 204],
    ['same-origin', EVIL, 204],
    ['same-origin', undefined, 204],
    ['same-site', OWN, 403],
    ['cross-site', OWN, 403],
    ['cross-site', EVIL, 403],
    ['none', OWN, 403],
    ['none', undefined, 403],
    ['', OWN, 403],
    ['Same-Origin', OWN, 403],
  ])('%s, Origin %s: %i', async (site, origin, status) => {
    const headers: Headers = { 'Sec-Fetch-Site': site, ...(origin ? { Origin: origin } : {}) };
    expect(await post({ ...headers, ...JSON_TYPE }, '{}')).toBe(status);
  });
});

describe('without it, Origin must be our own', () => {
  test.each([
    [OWN, 204],
    [EVIL, 403],
    ['null', 403],
    ['http://127.0.0.1:5181', 403],
    ['https://127.0.0.1:5180', 403],
    ['http://127.0.0.1:5180.evil.example.com', 403],
    ['', 403],
    [undefined, 403],
  ])('Origin %s: %i', async (origin, status) => {
    expect(await post({ ...(origin === undefined ? {} : { Origin: origin }), ...JSON_TYPE }, '{}')).toBe(
      status,
    );
  });

  test('a name of the shop’s own network counts where the request was sent to that name', async () => {
    expect(await post({ Host: 'shop-pc:5180', Origin: 'http://shop-pc:5180' })).toBe(204);
    expect(await post({ Host: 'shop-pc:5180', Origin: 'http://other-pc:5180' })).toBe(403);
    expect(await post({ Host: 'shop-pc:5180', Origin: 'https://shop-pc:5180' })).toBe(403);
  });
});

describe('a body is JSON or refused', () => {
  test.each([
    ['application/json', '{}', 204],
    ['application/json; charset=utf-8', '{}', 204],
    ['APPLICATION/JSON', '{}', 204],
    ['text/plain', '{}', 403],
    ['text/plain;application/json', '{}', 403],
    ['application/jsonp', '{}', 403],
    ['application/x-www-form-urlencoded', 'a=1', 403],
    ['multipart/form-data; boundary=x', '--x--', 403],
    ['application/csp-report', '{}', 403],
  ])('%s: %s gives %i', async (type, body, status) => {
    expect(await post({ 'Sec-Fetch-Site': 'same-origin', 'Content-Type': type }, body)).toBe(status);
  });

  test('no body at all is as good', async () => {
    expect(await post({ 'Sec-Fetch-Site': 'same-origin' })).toBe(204);
  });
});

describe('every method but the safe ones is checked, everywhere', () => {
  test.each(['post', 'put', 'patch', 'delete'] as const)('%s from another site', async (method) => {
    for (const path of ['/api/session', '/', '/t/abcdefghijklmnopqrstuv', '/s/shop/book']) {
      const answer = await supertest(app.express)[method](path).set('Sec-Fetch-Site', 'cross-site');
      expect(answer.status, `${method} ${path}`).toBe(403);
      expect(answer.body).toMatchObject({ error: { code: 'cross_site' } });
    }
  });

  test('reading from another site is let through, as a link is', async () => {
    await supertest(app.express).get('/api/session').set('Sec-Fetch-Site', 'cross-site').expect(200);
  });

  test('other sites are granted nothing when they ask first', async () => {
    const answer = await supertest(app.express)
      .options('/api/session')
      .set({ Origin: EVIL, 'Access-Control-Request-Method': 'POST' });
    expect(Object.keys(answer.headers).filter((name) => name.startsWith('access-control'))).toEqual([]);
  });
});

describe('doors with a proof of their own', () => {
  test.each(['/hooks/sms/inbound', '/u/abcdefghijklmnopqrstuv'])('%s is not stopped here', async (path) => {
    const headers = { 'Sec-Fetch-Site': 'cross-site', 'Content-Type': 'application/x-www-form-urlencoded' };
    expect(await supertest(app.express).post(path).set(headers).send('a=1')).not.toMatchObject({
      body: { error: { code: 'cross_site' } },
    });
  });

  test.each(['/hooks', '/u', '/u/a/b', '/api/u/abc', '/hooksy/x'])('%s is', async (path) => {
    expect(await post({ 'Sec-Fetch-Site': 'cross-site' }, undefined, path)).toBe(403);
  });
});
