import type supertest from 'supertest';
import { afterAll, beforeAll, describe, expect, test, vi } from 'vitest';
import { rows, withShop } from '#server/lib/db';
import { Person } from '#server/models/index';
import { makeShop, suspend, type TestShop } from '../support/factories';
import { pass, PASSWORD, placeCode, signedIn, startTestApp, visitor, type TestApp } from '../support/testApp';

const MINUTE = 60_000;
const HOUR = 60 * MINUTE;
const DAY = 24 * HOUR;

let app: TestApp;
let shop: TestShop;

beforeAll(async () => {
  app = await startTestApp();
  shop = await makeShop(app);
});
afterAll(() => app.stop());

const signInPath = () => `/api/shops/${shop.slug}/sign-in/password`;
const credentials = () => ({ email: shop.staff.counter.email, password: PASSWORD });
const cookiesOf = (answer: supertest.Response): string[] => [answer.get('Set-Cookie') ?? []].flat();
const sessionRows = () => rows<{ sid: string; sess: unknown }>('select sid, sess from session');

async function who(client: supertest.Agent): Promise<string | null> {
  const answer = await client.get('/api/session').expect(200);
  return (answer.body as { person: { name: string } | null }).person?.name ?? null;
}

describe('the cookie', () => {
  test('over plain http it is `sid`, for this site only and out of reach of scripts', async () => {
    const answer = await visitor(app).post(signInPath()).send(credentials()).expect(200);
    const [cookie = ''] = cookiesOf(answer);
    expect(cookie).toMatch(/^sid=/);
    expect(cookie.split('; ').slice(1).sort()).toEqual(['HttpOnly', 'Path=/', 'SameSite=Lax']);
  });

  test('over https it is `__Host-sid` with Secure, which no neighbour host can set', async () => {
    const client = visitor(app).set('X-Forwarded-Proto', 'https');
    const answer = await client.post(signInPath()).send(credentials()).expect(200);
    const [cookie = ''] = cookiesOf(answer);
    expect(cookie).toMatch(/^__Host-sid=/);
    expect(cookie.split('; ').slice(1).sort()).toEqual(['HttpOnly', 'Path=/', 'SameSite=Lax', 'Secure']);
  });

  test('a customer keeps it for thirty days', async () => {
    const client = visitor(app);
    const proof = await placeCode(app, shop.manager, 'sign_in');
    const answer = await client.post(`/api/shops/${shop.slug}/sign-in/code`).send(proof).expect(200);
    const expires = /Expires=([^;]+)/.exec(cookiesOf(answer)[0] ?? '')?.[1] ?? '';
    const days = (new Date(expires).getTime() - Date.now()) / DAY;
    expect(days).toBeGreaterThan(29.9);
    expect(days).toBeLessThan(30.1);
  });

  test('visitors get none, whatever they read', async () => {
    const client = visitor(app);
    for (const path of ['/api/session', `/api/shops/${shop.slug}`, '/healthz', '/api/nothing']) {
      expect(cookiesOf(await client.get(path))).toEqual([]);
    }
  });
});

test('signing in makes a new id, so a planted one is worth nothing', async () => {
  const planted = 'planted-by-somebody-else';
  const client = visitor(app);
  const answer = await client.post(signInPath()).set('Cookie', `sid=${planted}`).send(credentials());
  expect(cookiesOf(answer)[0]).not.toContain(planted);

  const first = cookiesOf(answer)[0]?.split(';')[0] ?? '';
  const again = await visitor(app).post(signInPath()).set('Cookie', first).send(credentials()).expect(200);
  expect(cookiesOf(again)[0]).not.toContain(first);
  const old = await visitor(app).get('/api/session').set('Cookie', first);
  expect((old.body as { person: unknown }).person).toBeNull();
});

test('the table holds hashes of ids that have 256 bits', async () => {
  const answer = await visitor(app).post(signInPath()).send(credentials());
  const signedId = decodeURIComponent(/sid=([^;]+)/.exec(cookiesOf(answer)[0] ?? '')?.[1] ?? '');
  const id = signedId.replace(/^s:/, '').split('.')[0] ?? '';
  expect(Buffer.from(id, 'base64url')).toHaveLength(32);
  const kept = await sessionRows();
  expect(kept.length).toBeGreaterThan(0);
  expect(JSON.stringify(kept)).not.toContain(id);
  expect(kept.every(({ sid }) => /^[0-9a-f]{64}$/.test(sid))).toBe(true);
});

describe('how long a session lives', () => {
  test('staff: 30 minutes unused', async () => {
    const client = await signedIn(app, shop, shop.staff.counter);
    pass(app, 29 * MINUTE);
    expect(await who(client)).toBe(shop.staff.counter.name);
    pass(app, 29 * MINUTE);
    expect(await who(client)).toBe(shop.staff.counter.name);
    pass(app, 31 * MINUTE);
    expect(await who(client)).toBeNull();
  });

  test('staff: 12 hours in all, however busy', async () => {
    const client = await signedIn(app, shop, shop.staff.counter);
    for (let minutes = 20; minutes < 12 * 60; minutes += 20) {
      pass(app, 20 * MINUTE);
      expect(await who(client)).toBe(shop.staff.counter.name);
    }
    pass(app, 20 * MINUTE);
    expect(await who(client)).toBeNull();
  });

  test('customers: 14 days unused, 30 in all', async () => {
    const idle = await signedIn(app, shop, shop.manager);
    pass(app, 14 * DAY - MINUTE);
    expect(await who(idle)).toBe(shop.manager.name);
    pass(app, 14 * DAY);
    expect(await who(idle)).toBeNull();

    const busy = await signedIn(app, shop, shop.manager);
    for (let day = 10; day < 30; day += 10) {
      pass(app, 10 * DAY);
      expect(await who(busy)).toBe(shop.manager.name);
    }
    pass(app, 10 * DAY);
    expect(await who(busy)).toBeNull();
  });

  test('use is stamped at most once a minute', async () => {
    const client = await signedIn(app, shop, shop.staff.owner);
    const stamps = async () => {
      const found = await rows<{ seen: string | null }>(
        `select sess ->> 'seenAt' as seen from session where sess #>> '{passport,user,personId}' = $1`,
        [shop.staff.owner.id],
      );
      return found.map(({ seen }) => seen);
    };
    pass(app, 59_000);
    await who(client);
    expect(await stamps()).toEqual([null]);
    pass(app, 1000);
    await who(client);
    const [stamped] = await stamps();
    expect(stamped).toBe(String(app.clock.now().getTime()));
    pass(app, 59_000);
    await who(client);
    expect(await stamps()).toEqual([stamped]);
  });
});

describe('the end of a session', () => {
  test('signing out ends it on the server and takes the cookie back', async () => {
    const client = await signedIn(app, shop, shop.staff.mechanic);
    const answer = await client.post('/api/sign-out').expect(204);
    expect(cookiesOf(answer)[0]).toMatch(/^sid=; Path=\/; Expires=Thu, 01 Jan 1970/);
    expect(await who(client)).toBeNull();
  });

  test('signing out everywhere ends the person’s others too, and nobody else’s', async () => {
    const here = await signedIn(app, shop, shop.staff.mechanic);
    const there = await signedIn(app, shop, shop.staff.mechanic);
    const colleague = await signedIn(app, shop, shop.staff.counter);
    await here.post('/api/sign-out-everywhere').expect(204);
    expect(await who(here)).toBeNull();
    expect(await who(there)).toBeNull();
    expect(await who(colleague)).toBe(shop.staff.counter.name);
  });

  test('signing out everywhere needs somebody who is signed in', async () => {
    await visitor(app).post('/api/sign-out-everywhere').expect(401);
  });

  test('a request under way does not bring an ended session back', async () => {
    const client = await signedIn(app, shop, shop.staff.driver);
    pass(app, 2 * MINUTE);
    // Ends the session between its reading at the start of the request and its stamp at the end.
    const begin = await withSessionGone(() => client.get('/api/session'), shop.staff.driver.id);
    expect(begin.status).toBe(200);
    expect(await who(client)).toBeNull();
  });

  test('whoever has left, and everybody of a suspended shop, is out at once', async () => {
    const client = await signedIn(app, shop, shop.bookkeeper);
    await withShop(shop.id, () =>
      Person.update({ leftAt: app.clock.now() }, { where: { id: shop.bookkeeper.id } }),
    );
    expect(await who(client)).toBeNull();

    const closing = await makeShop(app);
    const staff = await signedIn(app, closing, closing.staff.owner);
    await suspend(app, closing.id, app.clock.now());
    expect(await who(staff)).toBeNull();
    await visitor(app).get(`/api/shops/${closing.slug}`).expect(404);
    await visitor(app)
      .post(`/api/shops/${closing.slug}/sign-in/password`)
      .send({ email: closing.staff.owner.email, password: PASSWORD })
      .expect(404);
  });
});

/** Deletes the person's sessions while the request that `send` makes is waiting for its person to be loaded. */
async function withSessionGone(send: () => supertest.Test, personId: string): Promise<supertest.Response> {
  const find = Person.findOne.bind(Person);
  const spy = vi.spyOn(Person, 'findOne').mockImplementationOnce(async (...args: unknown[]) => {
    await app.owner.query(`delete from session where sess #>> '{passport,user,personId}' = $1`, {
      bind: [personId],
    });
    return find(...(args as Parameters<typeof find>));
  });
  const answer = await send();
  spy.mockRestore();
  return answer;
}

test('a session is of one shop: signing in elsewhere replaces it', async () => {
  const other = await makeShop(app);
  const client = await signedIn(app, shop, shop.staff.counter);
  await client
    .post(`/api/shops/${other.slug}/sign-in/password`)
    .send({ email: other.staff.counter.email, password: PASSWORD })
    .expect(200);
  const answer = await client.get('/api/session');
  expect(answer.body).toMatchObject({ person: { shop: { slug: other.slug } } });
});

test('says who is signed in and what they may, and nothing of the password', async () => {
  const client = await signedIn(app, shop, shop.crewLead);
  const answer = await client.get('/api/session');
  expect(answer.body).toEqual({
    now: app.clock.now().toISOString(),
    person: {
      id: shop.crewLead.id,
      name: shop.crewLead.name,
      roles: ['crew_lead'],
      language: 'en',
      phone: shop.crewLead.phone,
      email: shop.crewLead.email,
      textsOn: false,
      account: { id: shop.account.id, name: shop.account.name },
      shop: { slug: shop.slug, name: shop.name, zone: shop.zone, phone: shop.settings.phone },
      abilities: ['fleet.view', 'book'],
    },
  });
});

test('a cookie that somebody made up signs nobody in', async () => {
  const made = `sid=${encodeURIComponent('s:made-up.bm90IGEgc2lnbmF0dXJl')}`;
  const answer = await visitor(app).get('/api/session').set('Cookie', made);
  expect(answer.body).toMatchObject({ person: null });
});
