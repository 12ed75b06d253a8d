/** Who may do what, over the whole route table, against a table of its own written from the product's. */
import type { Response } from 'supertest';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { routeTable } from '#server/routes/table';
import { gatherEverybody, MEMBERS, STRANGERS, type Everybody, type Member } from '../support/everybody';
import { errorOf } from '../support/jobs';
import { ask, fillHouse, guestBody, sampleOf, SAMPLES, type Asking } from '../support/samples';
import { signedIn, startTestApp, visitor, type Client, type TestApp } from '../support/testApp';

interface Rule {
  /** Members of the shop who may. */
  may: readonly Member[];
  /** What they are answered, and whoever may not. */
  yes: number;
  no: number;
  /** Whoever has no session. */
  stranger: number;
  /** Members of another shop, where not the same as `foreign` says for each. */
  foreign: (member: Member) => number;
}

const FLOOR: readonly Member[] = ['counter', 'mechanic', 'owner'];
const BOOKERS: readonly Member[] = ['manager', 'otherManager', 'crewLead', 'otherCrewLead'];

/** Anybody at all, whoever and wherever he is. */
const anybody = (yes = 200): Rule => ({ may: MEMBERS, yes, no: 0, stranger: yes, foreign: () => yes });
/** About the person's own shop, so that another shop's people are answered of theirs. */
const ofOwnShop = (may: readonly Member[], yes = 200): Rule => ({
  may,
  yes,
  no: 403,
  stranger: 401,
  foreign: (member) => (may.includes(member) ? yes : 403),
});
/** About something of this shop, which is nothing to another's people. */
const ofThisShop = (may: readonly Member[], yes = 200): Rule => ({
  may,
  yes,
  no: 403,
  stranger: 401,
  foreign: () => 404,
});

const RULES: Record<string, Rule> = {
  'GET /api/session': anybody(),
  'POST /api/sign-out': anybody(204),
  'POST /api/sign-out-everywhere': ofOwnShop(MEMBERS, 204),
  'POST /api/shops/:shop/sign-in/code': anybody(),
  'POST /api/shops/:shop/sign-in/password': anybody(),
  'POST /api/shops/:shop/codes': anybody(),
  'GET /api/shops/:shop/password-links/:token': anybody(),
  'POST /api/shops/:shop/password-links/:token': anybody(),
  'GET /api/shops/:shop': anybody(),
  'GET /api/shops/:shop/times': anybody(),
  // Without a proved phone: whoever is somebody here books for himself, everybody else is asked who he is.
  'POST /api/shops/:shop/bookings': { may: BOOKERS, yes: 201, no: 403, stranger: 401, foreign: () => 401 },
  'POST /api/shops/:shop/stubs': anybody(),
  'GET /api/fleet': ofOwnShop(BOOKERS),
  'GET /api/t/:token': anybody(),
  'GET /api/shop/gate': ofOwnShop(FLOOR),
  'GET /api/shop/rail': ofOwnShop(FLOOR),
  'GET /api/shop/jobs/:tag': ofThisShop(FLOOR),
  'POST /api/shop/jobs/:tag/moves': ofThisShop(FLOOR),
  'POST /api/shop/jobs/:tag/undo': ofThisShop(FLOOR),
  'POST /api/shop/jobs/:tag/corrections': ofThisShop(FLOOR),
  'POST /api/shop/jobs/:tag/notes': ofThisShop(FLOOR),
  'POST /api/shop/people/:id/stop-texts': ofThisShop(['counter', 'owner'], 204),
  'POST /api/csp-reports': anybody(204),
  'GET /api/u/:token': anybody(),
  'POST /u/:token': anybody(),
  // The provider's signature opens these, and no session does.
  'POST /hooks/sms/inbound': anybody(403),
  'POST /hooks/sms/status/:shopId/:messageId/:attempt': anybody(403),
  'GET /healthz': anybody(),
};

let app: TestApp;
let everybody: Everybody;
let table: string[];

beforeAll(async () => {
  app = await startTestApp();
  everybody = await gatherEverybody(app);
  await fillHouse(app, everybody.own);
  await fillHouse(app, everybody.other);
  table = routeTable(app.services).map(({ method, path }) => `${method.toUpperCase()} ${path}`);
});
afterAll(() => app.stop());

/** Whatever ends sessions comes last, and each time with a session made for it. */
const routes = Object.keys(RULES).sort(
  (one, other) => Number(SAMPLES[one]?.endsSession ?? 0) - Number(SAMPLES[other]?.endsSession ?? 0),
);

async function clientOf(house: 'own' | 'other', member: Member, route: string): Promise<Client> {
  const { clients, shop, people } = everybody[house];
  return SAMPLES[route]?.endsSession ? signedIn(app, shop, people[member]) : clients[member];
}

/** What is the other shop's alone: names, addresses, the area code of all its phones. */
const ofTheOther = (): string[] => {
  const { shop, people } = everybody.other;
  const phones = [shop.settings.phone, shop.sender].map((phone) => phone.slice(0, 8));
  const ids = [shop.id, ...Object.values(people).map(({ id }) => id), ...shop.machines.map(({ id }) => id)];
  return ['Vesper Yard', 'vesper-yard', ...phones, ...ids];
};

function expectNothingForeign(answer: Response): void {
  const said = JSON.stringify([answer.headers, answer.text]);
  expect(ofTheOther().filter((secret) => said.includes(secret))).toEqual([]);
}

test('the table of expectations and the route table name the same routes', () => {
  expect([...table].sort()).toEqual(Object.keys(RULES).sort());
  expect(Object.keys(SAMPLES).sort()).toEqual(Object.keys(RULES).sort());
});

const guarded = Object.keys(RULES).filter((route) => RULES[route]?.stranger === 401);
const isPublic = (route: string) => route.includes('/bookings');

describe('the order of answers', () => {
  test.each(guarded.filter((route) => !isPublic(route)))('%s: 401 before all else', async (route) => {
    for (const id of ['nonsense', '%00', '%E0%A4%A', 'x'.repeat(3000)]) {
      const answer = await ask(app, everybody.strangers.anonymous, route, everybody.own, {
        id,
        body: { rubbish: true },
      });
      expect([answer.status, errorOf(answer).code]).toEqual([401, 'unauthenticated']);
    }
  });

  const about = guarded.filter((route) => /:(tag|id)/.test(route));
  test.each(about)('%s: 404, then 403, then 400', async (route) => {
    const { clients } = everybody.own;
    const body = { rubbish: true };
    const nobodysId = route.includes(':id') ? '3f0c6a52-6a0e-4a3e-9a51-0d8f6f0f7b11' : 'ZZZZZZ';
    const unknown = await ask(app, clients.driver, route, everybody.own, { id: nobodysId, body });
    expect(unknown.status).toBe(404);
    const refused = await ask(app, clients.driver, route, everybody.own, { body });
    expect([refused.status, errorOf(refused).code]).toEqual([403, 'forbidden']);
    if (!SAMPLES[route]?.body) return;
    const wrong = await ask(app, clients.owner, route, everybody.own, { body });
    expect([wrong.status, errorOf(wrong).code]).toEqual([400, 'invalid']);
  });
});

test('a guest who has proved his phone books; the same words without the proof do not', async () => {
  const { own, strangers } = everybody;
  const body = await guestBody(app, own);
  const route = 'POST /api/shops/:shop/bookings';
  expect((await ask(app, strangers.guest, route, own, { body })).status).toBe(201);
  const { guest: _guest, ...unproved } = body;
  expect((await ask(app, strangers.guest, route, own, { body: unproved })).status).toBe(401);
});

test('a refusal is on record, with who and what', async () => {
  const { own } = everybody;
  await ask(app, own.clients.bookkeeper, 'GET /api/shop/rail', own);
  const [found] = await app.owner.query(
    `select details ->> 'path' as path from audit_events where kind = 'refused' and person_id = $1`,
    { bind: [own.people.bookkeeper.id] },
  );
  expect(found).toContainEqual({ path: '/api/shop/rail' });
});

test('a link holder sees the visit of his link and nothing that staff see', async () => {
  const { own, strangers } = everybody;
  const answer = await ask(app, strangers.linkHolder, 'GET /api/t/:token', own);
  expect(answer.status).toBe(200);
  expect(Object.keys(answer.body as object).sort()).toEqual([
    'account',
    'arrivesAt',
    'language',
    'machines',
    'nextChangeAt',
    'now',
    'shop',
    'stubCode',
  ]);
  for (const { phone, email } of Object.values(own.people)) {
    expect(answer.text).not.toContain(phone ?? email ?? '');
  }
});

describe.each(routes)('%s', (route) => {
  const rule = RULES[route] ?? anybody();
  /** Whoever is refused, or only reads, leaves what he asks about as it was for the next one. */
  let shared: Asking | undefined;
  async function about(expected: number): Promise<Asking> {
    if (expected < 400 && !route.startsWith('GET ')) return {};
    return (shared ??= await sampleOf(app, route, everybody.own));
  }

  test('members of the shop', async () => {
    const answers: Record<string, number> = {};
    for (const member of MEMBERS) {
      const expected = rule.may.includes(member) ? rule.yes : rule.no;
      const client = await clientOf('own', member, route);
      const answer = await ask(app, client, route, everybody.own, await about(expected));
      answers[member] = answer.status;
      expectNothingForeign(answer);
    }
    const expected = MEMBERS.map((member) => [member, rule.may.includes(member) ? rule.yes : rule.no]);
    expect(answers).toEqual(Object.fromEntries(expected));
  });

  test('strangers, link holders, guests and former members', async () => {
    const answers: Record<string, number> = {};
    for (const stranger of STRANGERS) {
      const client = SAMPLES[route]?.endsSession ? visitor(app) : everybody.strangers[stranger];
      const answer = await ask(app, client, route, everybody.own, await about(rule.stranger));
      answers[stranger] = answer.status;
      expectNothingForeign(answer);
    }
    expect(answers).toEqual(Object.fromEntries(STRANGERS.map((name) => [name, rule.stranger])));
  });

  test('members of another shop', async () => {
    const answers: Record<string, number> = {};
    for (const member of MEMBERS) {
      const client = await clientOf('other', member, route);
      const answer = await ask(app, client, route, everybody.own, await about(rule.foreign(member)));
      answers[member] = answer.status;
      if (rule.foreign(member) >= 400) expect(answer.text).not.toContain('Quarrel Lane');
    }
    expect(answers).toEqual(Object.fromEntries(MEMBERS.map((name) => [name, rule.foreign(name)])));
  });
});
