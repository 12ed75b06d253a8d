/** Another shop's id is answered as an id that nobody has, byte for byte, to everybody and everywhere. */
import { randomUUID } from 'node:crypto';
import type { Response } from 'supertest';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { withShop } from '#server/lib/db';
import { newToken, pick } from '#server/lib/ids';
import { Tag } from '#server/models/index';
import { drawCode } from '#shared/domain/tagCode';
import { gatherEverybody, MEMBERS, type Everybody } from '../support/everybody';
import {
  atGate,
  bookBody,
  bookJob,
  bringTo,
  errorOf,
  newKey,
  newMachine,
  postAct,
  postBooking,
  sheetOf,
} from '../support/jobs';
import { ask, SAMPLES } from '../support/samples';
import { placeCode, startTestApp, visitor, type Client, type TestApp } from '../support/testApp';

let app: TestApp;
let everybody: Everybody;

beforeAll(async () => {
  app = await startTestApp();
  everybody = await gatherEverybody(app);
  // The first request of somebody who has left ends the session; what follows is a stranger's.
  await everybody.strangers.formerOwner.get('/api/session').expect(200);
});
afterAll(() => app.stop());

/** What differs from one answer to the next whatever is asked. */
function comparable(answer: Response) {
  const {
    'x-request-id': id,
    date: _date,
    etag: _etag,
    ...headers
  } = answer.headers as Record<string, string>;
  const nonce = /'nonce-([^']+)'/.exec(headers['content-security-policy'] ?? '')?.[1] ?? ' ';
  const text = answer.text.replaceAll(id ?? ' ', 'REQUEST');
  return { status: answer.status, text, headers: JSON.stringify(headers).replaceAll(nonce, 'NONCE') };
}

const MALFORMED = ['x', '%00', '%E0%A4%A', '..%2f..', "'--", '0'.repeat(500)];

/** An id of the right form that nobody has. */
function idOfNobody(route: string): string {
  if (route.includes(':tag')) return drawCode(pick);
  return route.includes(':id') ? randomUUID() : newToken();
}

/** A link that opens for whoever holds it, of whichever shop: no other shop's is foreign to it. */
const OPENS_ANYWHERE = /\/[tu]\/:token$/;
const routes = Object.keys(SAMPLES).filter((route) => SAMPLES[route]?.subject);

describe.each(routes)('%s', (route) => {
  test('a foreign id, one of nobody and nonsense', async () => {
    const { own, other, strangers } = everybody;
    const foreign = await SAMPLES[route]?.subject?.(app, other);
    const ids = [idOfNobody(route), idOfNobody(route), ...MALFORMED];
    if (foreign && !OPENS_ANYWHERE.test(route)) ids.push(foreign);
    const clients: [string, Client][] = [
      ...MEMBERS.map((member): [string, Client] => [member, own.clients[member]]),
      ['anonymous', strangers.anonymous],
      ['former', strangers.formerOwner],
    ];
    const body = await SAMPLES[route]?.body?.(app, own, (await SAMPLES[route]?.subject?.(app, own)) ?? '');
    for (const [name, client] of clients) {
      const [first, ...rest] = await inOrder(ids, (id) => ask(app, client, route, own, { id, body }));
      expect([401, 404]).toContain(first?.status);
      for (const [at, answer] of rest.entries()) expect(answer, `${name}, ${ids[at + 1]}`).toEqual(first);
    }
  });
});

async function inOrder(ids: string[], send: (id: string) => PromiseLike<Response>) {
  const answers = [];
  for (const id of ids) answers.push(comparable(await send(id)));
  return answers;
}

describe('ids in bodies', () => {
  /** Sends with the foreign id and with one of nobody; both are refused alike. */
  async function expectAlike(foreign: string, nobodys: string, send: (id: string) => PromiseLike<Response>) {
    const [one, two] = await inOrder([foreign, nobodys], send);
    expect(two).toEqual(one);
    expect(one?.status).toBeGreaterThanOrEqual(400);
    expect(one?.status).toBeLessThan(500);
    return one;
  }

  test('a machine to be booked', async () => {
    const { own, other } = everybody;
    const complaintKindId = own.shop.complaintKinds[0]?.id;
    const send = (machineId: string) =>
      postBooking(
        own.clients.manager,
        own.shop,
        bookBody(own.shop, { machines: [{ from: 'fleet', machineId, complaintKindId }] }),
      );
    await expectAlike(other.shop.machines[0]?.id ?? '', randomUUID(), send);
  });

  test('a kind of complaint', async () => {
    const { own, other } = everybody;
    const send = (complaintKindId: string) =>
      postBooking(
        own.clients.manager,
        own.shop,
        bookBody(own.shop, { machines: [newMachine(own.shop, { complaintKindId })] }),
      );
    await expectAlike(other.shop.complaintKinds[0]?.id ?? '', randomUUID(), send);
  });

  test('a request for a code, at sign-in and at booking', async () => {
    const { own, other } = everybody;
    const proof = await placeCode(app, other.shop.manager, 'sign_in');
    await expectAlike(proof.requestId, randomUUID(), (requestId) =>
      visitor(app).post(`/api/shops/${own.shop.slug}/sign-in/code`).send({ requestId, code: proof.code }),
    );
    const booking = await placeCode(app, other.shop.manager, 'book');
    const guest = { name: 'Lou', accountName: 'Lou Decks', email: '', phone: other.shop.manager.phone };
    await expectAlike(booking.requestId, randomUUID(), (requestId) =>
      postBooking(
        visitor(app),
        own.shop,
        bookBody(own.shop, { guest: { ...guest, code: booking.code, requestId } }),
      ),
    );
  });

  test('the person who brought a machine, and the blank tag hung on it', async () => {
    const { own, other } = everybody;
    const { tag } = await bookJob(app, own.shop);
    const blank = drawCode(pick);
    await withShop(other.shop.id, () =>
      Tag.create({ shopId: other.shop.id, id: randomUUID(), code: blank, fromAt: app.clock.now() }),
    );
    const checkIn = (changes: object) => ({
      version: 1,
      to: 'checked_in',
      checkIn: { ...atGate, broughtByName: '', ...changes },
    });
    const { counter } = own.clients;
    await expectAlike(other.people.manager.id, randomUUID(), (broughtByPersonId) =>
      postAct(counter, tag, 'moves', checkIn({ broughtByPersonId })),
    );
    await expectAlike(blank, drawCode(pick), (newTag) =>
      postAct(counter, tag, 'moves', checkIn({ broughtByName: 'Ray', newTag })),
    );
    expect((await sheetOf(counter, tag)).job.stage).toBe('booked');
  });

  test('an event to undo', async () => {
    const { own, other } = everybody;
    const there = await bookJob(app, other.shop);
    const { job } = await bringTo(other.clients.owner, there.tag, 'checked_in');
    const { tag } = await bookJob(app, own.shop);
    await expectAlike(job.undo?.eventId ?? '', randomUUID(), (eventId) =>
      postAct(own.clients.owner, tag, 'undo', { eventId }),
    );
  });

  test('an Idempotency-Key that the other shop has used is free here', async () => {
    const { own, other } = everybody;
    const key = newKey();
    const there = await postBooking(other.clients.manager, other.shop, bookBody(other.shop), key);
    const here = await postBooking(own.clients.manager, own.shop, bookBody(own.shop), key);
    expect([there.status, here.status]).toEqual([201, 201]);
  });

  test('a stub code with the right digits opens nothing at another shop', async () => {
    const { own, other } = everybody;
    const { stubCode } = await bookJob(app, other.shop);
    const lastFour = other.shop.manager.phone?.slice(-4);
    const send = (code: string) =>
      visitor(app).post(`/api/shops/${own.shop.slug}/stubs`).send({ code, lastFour });
    const answer = await expectAlike(stubCode, drawCode(pick), send);
    expect(answer?.status).toBe(404);
    const nonsense = comparable(await send('ZZZZZZ'));
    expect(nonsense).toEqual(answer);
  });
});

test('an address that no shop has says no more than that', async () => {
  const client = visitor(app);
  const answers = await inOrder(['no-such-shop', 'UPPER', 'a b', '%00'], (slug) =>
    client.get(`/api/shops/${encodeURI(slug)}`),
  );
  for (const answer of answers) expect(answer).toEqual(answers[0]);
  expect(answers[0]?.status).toBe(404);
  const gone = await client.get('/api/shops/no-such-shop');
  expect(errorOf(gone).code).toBe('not_found');
});
