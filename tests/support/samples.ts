/** One valid request for each route, about something fresh of a house. The matrix and the fuzz start from these. */
import { withShop } from '#server/lib/db';
import { createPasswordLink } from '#server/lib/passwordLinks';
import { newId } from '#server/lib/ids';
import { unsubscribeToken } from '#server/messages/unsubscribe';
import { addPerson } from './factories';
import type { House } from './everybody';
import { atGate, bookBody, bookJob, bookJobs, bringTo, newKey, sheetOf } from './jobs';
import { PASSWORD, placeCode, type Client, type TestApp } from './testApp';

type Loose = Record<string, unknown>;

export interface Sample {
  /** The address, of the shop and of the subject's id. */
  path: (slug: string, id: string) => string;
  /** Makes something for the request to be about. @returns its id, tag or token */
  subject?: (app: TestApp, house: House) => Promise<string>;
  /** Makes a body that is right. */
  body?: (app: TestApp, house: House, id: string) => Promise<Loose> | Loose;
  /** Asks for an Idempotency-Key. */
  keyed?: boolean;
  /** Ends or replaces the session it is sent with. */
  endsSession?: boolean;
}

let asked = 0;
/** Phones that get codes come from many area codes, as those of one are counted together. */
const phoneElsewhere = (): string => `+1${302 + (asked++ % 7)}55501${String(asked % 100).padStart(2, '0')}`;

const freshTag = async (app: TestApp, { shop }: House) => (await bookJob(app, shop)).tag;

async function tagInShop(app: TestApp, house: House): Promise<string> {
  const tag = await freshTag(app, house);
  await bringTo(house.clients.owner, tag, 'checked_in');
  return tag;
}

/** A manager whom only this request is about, with a phone. */
function freshPerson(app: TestApp, { shop }: House) {
  const fields = {
    name: 'Wanda',
    phone: shop.nextPhone(),
    email: 'wanda@example.com',
    accountId: shop.account.id,
  };
  return withShop(shop.id, () => addPerson(app, shop.id, ['manager'], fields));
}

async function guestBody(app: TestApp, { shop }: House): Promise<Loose> {
  const phone = shop.nextPhone();
  const proof = await placeCode(app, { shopId: shop.id, phone }, 'book');
  const guest = { name: 'Lou', accountName: 'Lou Decks', email: 'lou@example.com', phone, ...proof };
  return bookBody(shop, { guest });
}

/** By method and path as the route table writes them. */
export const SAMPLES: Record<string, Sample> = {
  'GET /api/session': { path: () => '/api/session' },
  'POST /api/sign-out': { path: () => '/api/sign-out', endsSession: true },
  'POST /api/sign-out-everywhere': { path: () => '/api/sign-out-everywhere', endsSession: true },
  'POST /api/shops/:shop/sign-in/code': {
    path: (slug) => `/api/shops/${slug}/sign-in/code`,
    body: async (app, house) => placeCode(app, await freshPerson(app, house), 'sign_in'),
    endsSession: true,
  },
  'POST /api/shops/:shop/sign-in/password': {
    path: (slug) => `/api/shops/${slug}/sign-in/password`,
    body: (_app, { people }) => ({ email: people.counter.email, password: PASSWORD }),
    endsSession: true,
  },
  'POST /api/shops/:shop/codes': {
    path: (slug) => `/api/shops/${slug}/codes`,
    body: () => ({ phone: phoneElsewhere(), purpose: 'book', language: 'en', consent: true }),
  },
  'GET /api/shops/:shop/password-links/:token': {
    path: (slug, id) => `/api/shops/${slug}/password-links/${id}`,
    subject: freshPasswordLink,
  },
  'POST /api/shops/:shop/password-links/:token': {
    path: (slug, id) => `/api/shops/${slug}/password-links/${id}`,
    subject: freshPasswordLink,
    body: () => ({ password: 'nine copper kettles whistling' }),
  },
  'GET /api/shops/:shop': { path: (slug) => `/api/shops/${slug}` },
  'GET /api/shops/:shop/times': { path: (slug) => `/api/shops/${slug}/times` },
  'POST /api/shops/:shop/bookings': {
    path: (slug) => `/api/shops/${slug}/bookings`,
    body: (_app, { shop }) => bookBody(shop),
    keyed: true,
  },
  'POST /api/shops/:shop/stubs': {
    path: (slug) => `/api/shops/${slug}/stubs`,
    body: async (app, { shop }) => {
      const { stubCode } = await bookJob(app, shop);
      return { code: stubCode, lastFour: shop.manager.phone?.slice(-4) };
    },
  },
  'GET /api/fleet': { path: () => '/api/fleet' },
  'GET /api/t/:token': {
    path: (_slug, id) => `/api/t/${id}`,
    subject: async (app, { shop }) => (await bookJob(app, shop)).token,
  },
  'GET /api/shop/gate': { path: () => '/api/shop/gate' },
  'GET /api/shop/rail': { path: () => '/api/shop/rail' },
  'GET /api/shop/jobs/:tag': { path: (_slug, id) => `/api/shop/jobs/${id}`, subject: freshTag },
  'POST /api/shop/jobs/:tag/moves': {
    path: (_slug, id) => `/api/shop/jobs/${id}/moves`,
    subject: freshTag,
    body: () => ({ version: 1, to: 'checked_in', checkIn: atGate }),
    keyed: true,
  },
  'POST /api/shop/jobs/:tag/undo': {
    path: (_slug, id) => `/api/shop/jobs/${id}/undo`,
    subject: tagInShop,
    body: async (_app, { clients }, id) => ({
      eventId: (await sheetOf(clients.owner, id)).job.undo?.eventId,
    }),
    keyed: true,
  },
  'POST /api/shop/jobs/:tag/corrections': {
    path: (_slug, id) => `/api/shop/jobs/${id}/corrections`,
    subject: tagInShop,
    body: () => ({ version: 2, to: 'booked', reason: 'the wrong machine', tell: false }),
    keyed: true,
  },
  'POST /api/shop/jobs/:tag/notes': {
    path: (_slug, id) => `/api/shop/jobs/${id}/notes`,
    subject: freshTag,
    body: () => ({ body: 'call before noon' }),
    keyed: true,
  },
  'POST /api/shop/people/:id/stop-texts': {
    path: (_slug, id) => `/api/shop/people/${id}/stop-texts`,
    subject: async (app, house) => (await freshPerson(app, house)).id,
  },
  'POST /api/csp-reports': {
    path: () => '/api/csp-reports',
    body: () => ({ 'csp-report': { 'document-uri': 'http://127.0.0.1/', 'blocked-uri': 'inline' } }),
  },
  'GET /api/u/:token': { path: (_slug, id) => `/api/u/${id}`, subject: freshUnsubscribeToken },
  'POST /u/:token': { path: (_slug, id) => `/u/${id}`, subject: freshUnsubscribeToken },
  // Sent by a browser, so without the provider's signature.
  'POST /hooks/sms/inbound': { path: () => '/hooks/sms/inbound' },
  'POST /hooks/sms/status/:shopId/:messageId/:attempt': {
    path: () => `/hooks/sms/status/${newId()}/${newId()}/1`,
  },
  'GET /healthz': { path: () => '/healthz' },
};

async function freshPasswordLink(app: TestApp, house: House): Promise<string> {
  const { id } = await freshPerson(app, house);
  return withShop(house.shop.id, () => createPasswordLink(house.shop.id, id, app.clock.now()));
}

async function freshUnsubscribeToken(app: TestApp, house: House): Promise<string> {
  const { id } = await freshPerson(app, house);
  return unsubscribeToken(app.env, house.shop.id, id);
}

/** The body of a guest's booking, whose phone has just been proved. */
export { guestBody };

export interface Asking {
  /** What the request is about, in place of something fresh of the house. */
  id?: string;
  body?: unknown;
  language?: string;
}

/** Makes what the sample of a route is about, and its body, to be asked for more than once. */
export async function sampleOf(app: TestApp, route: string, house: House): Promise<Asking> {
  const id = (await SAMPLES[route]?.subject?.(app, house)) ?? '';
  return { id, body: await SAMPLES[route]?.body?.(app, house, id) };
}

/** Sends the sample of a route about a house, changed as asked. */
export async function ask(app: TestApp, client: Client, route: string, house: House, changes: Asking = {}) {
  const sample = SAMPLES[route];
  if (!sample) throw new Error(`no sample for ${route}`);
  const id = changes.id ?? (await sample.subject?.(app, house)) ?? '';
  const isGet = route.startsWith('GET ');
  const path = sample.path(house.shop.slug, id);
  const request = isGet ? client.get(path) : client.post(path);
  if (sample.keyed) request.set('Idempotency-Key', newKey());
  if (changes.language) request.set('Accept-Language', changes.language);
  if (isGet) return request;
  const body = 'body' in changes ? changes.body : await sample.body?.(app, house, id);
  return request.send(body as object | undefined);
}

/** Some work in a house, so that there is something to see: two visits, one of them in the shop. */
export async function fillHouse(app: TestApp, house: House): Promise<{ jobId: string; tags: string[] }> {
  const { shop } = house;
  const machines = shop.machines.slice(0, 2).map(({ id }) => ({
    from: 'fleet',
    machineId: id,
    complaintKindId: shop.complaintKinds[0]?.id,
  }));
  const arrivesAt = '2026-12-03T18:00:00.000Z';
  const { jobs } = await bookJobs(app, shop, { machines, arrivesAt });
  const tags = jobs.map(({ tag }) => tag);
  await bringTo(house.clients.owner, tags[0] ?? '', 'checked_in');
  return { jobId: newId(), tags };
}
