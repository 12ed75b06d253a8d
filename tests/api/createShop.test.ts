import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { rows, withShop } from '#server/lib/db';
import { ComplaintKind, Person, Shop, ShopSettings } from '#server/models/index';
import { PASSWORD, startTestApp, visitor, type TestApp } from '../support/testApp';

let app: TestApp;

beforeAll(async () => {
  // The command runs in a process of its own, on real time.
  app = await startTestApp({ now: new Date() });
});
afterAll(() => app.stop());

const GOOD = {
  name: 'Ridge Road Small Engine Shop',
  slug: 'ridge-road',
  zone: 'America/Boise',
  'owner-name': 'Lou Varga',
  'owner-email': 'Lou@Example.com',
  phone: '(208) 555-0110',
  sender: '208-555-0111',
  address: '9 Ridge Road',
  'text-name': 'Ridge Road',
};

/** Runs the command as a person's shell does, without a terminal. */
async function create(given: Record<string, string>): Promise<{ code: number; out: string; err: string }> {
  const options = Object.entries(given).flatMap(([name, value]) => [`--${name}`, value]);
  const child = spawn(process.execPath, ['--import', 'tsx', 'server/cli/createShop.ts', ...options], {
    env: { ...process.env, ...Object.fromEntries(Object.entries(app.env).map(([k, v]) => [k, String(v)])) },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  const said = { out: '', err: '' };
  child.stdout.on('data', (chunk: Buffer) => (said.out += chunk.toString()));
  child.stderr.on('data', (chunk: Buffer) => (said.err += chunk.toString()));
  const [code] = (await once(child, 'close')) as [number];
  return { code, ...said };
}

test('opens a shop whose owner can set a password and sign in', async () => {
  const { code, out, err } = await create(GOOD);
  expect({ code, err }).toEqual({ code: 0, err: '' });
  const link = /http:\/\/127\.0\.0\.1:5180\/s\/ridge-road\/password\/([\w-]+)/.exec(out)?.[1] ?? '';
  expect(Buffer.from(link, 'base64url')).toHaveLength(24);

  const client = visitor(app);
  const view = await client.get(`/api/shops/ridge-road/password-links/${link}`).expect(200);
  expect(view.body).toMatchObject({ name: 'Lou Varga', email: 'lou@example.com' });
  await client.post(`/api/shops/ridge-road/password-links/${link}`).send({ password: PASSWORD }).expect(200);
  const session = await client
    .post('/api/shops/ridge-road/sign-in/password')
    .send({ email: 'lou@example.com', password: PASSWORD })
    .expect(200);
  expect(session.body).toMatchObject({ person: { roles: ['owner', 'counter', 'mechanic'] } });
});

test('has hours, complaint kinds in both languages and a number to text from', async () => {
  const shop = await Shop.findOne({ where: { slug: 'ridge-road' }, rejectOnEmpty: true });
  expect(shop).toMatchObject({ name: GOOD.name, zone: 'America/Boise', suspendedAt: null });
  expect(await rows('select phone from sender_numbers where shop_id = $1', [shop.id])).toEqual([
    { phone: '+12085550111' },
  ]);
  await withShop(shop.id, async () => {
    const settings = await ShopSettings.findOne({ rejectOnEmpty: true });
    expect(settings).toMatchObject({
      phone: '+12085550110',
      email: 'lou@example.com',
      textName: 'Ridge Road',
    });
    expect(settings.hours[1]).toEqual([{ from: '07:00', to: '17:00' }]);
    expect(settings.hours[7]).toEqual([]);
    const kinds = await ComplaintKind.findAll();
    expect(kinds.length).toBeGreaterThan(4);
    expect(kinds.every(({ labelEn, labelEs }) => labelEn && labelEs && labelEn !== labelEs)).toBe(true);
    expect(await Person.count()).toBe(1);
  });
  const view = await visitor(app).get('/api/shops/ridge-road').expect(200);
  expect(view.body).toMatchObject({ name: GOOD.name, address: '9 Ridge Road', closures: [] });
});

test('names every fault at once and makes nothing', async () => {
  const { code, err } = await create({
    name: '',
    slug: 'Ridge Road',
    zone: 'Mountain',
    'owner-email': 'lou',
    phone: '911',
    sender: '+44 20 7946 0018',
    'text-name': 'A name that is too long for texts',
  });
  expect(code).toBe(1);
  for (const field of [
    'name',
    'slug',
    'zone',
    'owner-name',
    'owner-email',
    'phone',
    'sender',
    'address',
    'text-name',
  ]) {
    expect(err).toMatch(new RegExp(`^  --${field}: .{8,}`, 'm'));
  }
  expect(err).toContain('--zone: A time zone by its full name, such as America/Denver.');
  expect(err).toContain('--owner-name: is missing');
  expect(err).not.toMatch(/errors\.|\{max\}|at .*\.ts:\d/);
  expect(await Shop.count()).toBe(1);
});

test('takes neither the address nor the number of another shop', async () => {
  const { code, err } = await create(GOOD);
  expect(code).toBe(1);
  expect(err).toContain('--slug: another shop has ridge-road');
  expect(err).toContain('--sender: another shop texts from +12085550111');
  expect(await Shop.count()).toBe(1);
});

test('says so when there is no such option', async () => {
  const { code, err } = await create({ ...GOOD, colour: 'red' });
  expect(code).toBe(1);
  expect(err).toContain("'--colour'");
});
