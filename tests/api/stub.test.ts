/** The public page of a visit: what it shows and when, what it never shows, when its link ends. */
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { withShop } from '#server/lib/db';
import { Link, Shop } from '#server/models/index';
import type { BookAnswer, FindStubAnswer } from '#shared/schemas/booking';
import type { LinkEndedDetails, StubView } from '#shared/schemas/stub';
import { makeShop, suspend, type TestShop } from '../support/factories';
import {
  atGate,
  bookJob,
  bookJobs,
  bringTo,
  countRows,
  errorOf,
  met,
  newMachine,
  postAct,
  postMove,
  sheetOf,
} from '../support/jobs';
import {
  pass,
  signedIn,
  startTestApp,
  THURSDAY_NINE,
  visitor,
  type Client,
  type TestApp,
} from '../support/testApp';
import type { MoveAnswer } from '#shared/schemas/job';

const GRACE = 60_000;
const DAY = 24 * 60 * 60_000;

let app: TestApp;
let shop: TestShop;
let owner: Client;

beforeAll(async () => {
  app = await startTestApp();
  shop = await makeShop(app, { placesPerHalfDay: 200 });
});
beforeEach(async () => {
  app.clock.set(THURSDAY_NINE);
  owner = await signedIn(app, shop, shop.staff.owner);
});
afterAll(() => app.stop());

const open = (token: string) => visitor(app).get(`/api/t/${token}`);
const read = async (token: string): Promise<StubView> => (await open(token).expect(200)).body as StubView;
const tokenOf = ({ stubPath }: Pick<BookAnswer, 'stubPath'>): string => stubPath.slice(3);
const firstOf = (view: StubView) => view.machines[0];

describe('the grace', () => {
  test('a move shows when it is over, and the answer says when that is', async () => {
    const { tag, token } = await bookJob(app, shop);
    expect(await read(token)).toMatchObject({ nextChangeAt: null, machines: [{ stage: 'booked' }] });
    await bringTo(owner, tag, 'checked_in');
    const until = new Date(app.clock.now().getTime() + GRACE).toISOString();
    const held = await read(token);
    expect(firstOf(held)?.stage).toBe('booked');
    expect(new Date(held.nextChangeAt ?? '').toISOString()).toBe(until);
    pass(app, GRACE - 1);
    expect(firstOf(await read(token))?.stage).toBe('booked');
    pass(app, 1);
    const shown = await read(token);
    expect(shown.nextChangeAt).toBeNull();
    expect(firstOf(shown)?.stage).toBe('checked_in');
    expect(firstOf(shown)?.history.map(({ stage }) => stage)).toEqual(['booked', 'checked_in']);
  });

  test('signed-in customers wait for it too', async () => {
    const { tag, token } = await bookJob(app, shop);
    await bringTo(owner, tag, 'checked_in');
    const manager = await signedIn(app, shop, shop.manager);
    const answer = await manager.get(`/api/t/${token}`).expect(200);
    expect(firstOf(answer.body as StubView)?.stage).toBe('booked');
  });

  test('what was undone is never shown', async () => {
    const { tag, token } = await bookJob(app, shop);
    const moved = await bringTo(owner, tag, 'checked_in');
    await postAct(owner, tag, 'undo', { eventId: moved.job.undo?.eventId }).expect(200);
    expect((await read(token)).nextChangeAt).toBeNull();
    pass(app, 2 * GRACE);
    const view = await read(token);
    expect(firstOf(view)?.history.map(({ stage }) => stage)).toEqual(['booked']);
  });

  test('what is corrected shows as it stands, after its own grace', async () => {
    const { tag, token } = await bookJob(app, shop);
    await bringTo(owner, tag, 'ready');
    pass(app, 2 * GRACE);
    expect(firstOf(await read(token))).toMatchObject({ stage: 'ready', outcome: 'repaired' });
    const { job } = await sheetOf(owner, tag);
    const body = { version: job.version, to: 'repair', reason: 'it leaks again', tell: false };
    await postAct(owner, tag, 'corrections', body).expect(200);
    expect(firstOf(await read(token))?.stage).toBe('ready');
    pass(app, GRACE);
    const view = await read(token);
    expect(firstOf(view)).toMatchObject({ stage: 'repair', outcome: null });
    expect(JSON.stringify(view)).not.toContain('it leaks again');
  });
});

describe('what it shows', () => {
  test('all machines of the visit and none of any other', async () => {
    const machines = [newMachine(shop, { fleetNumber: '1' }), newMachine(shop, { fleetNumber: '2' })];
    const booked = await bookJobs(app, shop, { machines });
    const other = await bookJobs(app, shop, { machines: [newMachine(shop, { fleetNumber: '99' })] });
    const view = await read(tokenOf(booked));
    expect(view.machines.map(({ tag }) => tag).sort()).toEqual(booked.jobs.map(({ tag }) => tag).sort());
    expect(JSON.stringify(view)).not.toContain(other.jobs[0]?.tag);
    expect(JSON.stringify(view)).not.toContain('"99"');
  });

  test('nothing that is the shop’s own: notes, lines, names of staff, people', async () => {
    const { tag, token } = await bookJob(app, shop, { note: 'ask for Wanda' });
    await postAct(owner, tag, 'notes', { body: 'owes us for March' }).expect(200);
    await bringTo(owner, tag, 'diagnosis');
    pass(app, 2 * GRACE);
    const text = JSON.stringify(await read(token));
    for (const secret of ['owes us', 'seen to', shop.staff.owner.name, shop.manager.name, shop.manager.id]) {
      expect(text).not.toContain(secret);
    }
    expect(text).not.toContain(shop.manager.phone);
  });

  test('address, hours and the wording in both languages', async () => {
    const { token } = await bookJob(app, shop);
    const view = await read(token);
    expect(view.shop).toMatchObject({ slug: shop.slug, name: shop.name, zone: shop.zone });
    expect(Object.keys(view.shop.hours)).toHaveLength(7);
    expect(Object.keys(firstOf(view)?.complaint ?? {}).sort()).toEqual(['en', 'es']);
  });
});

describe('looking', () => {
  test('changes nothing', async () => {
    const { token } = await bookJob(app, shop);
    const before = await countRows(app);
    for (let times = 0; times < 3; times += 1) await open(token).expect(200);
    await open('nonsense').expect(404);
    expect(await countRows(app)).toEqual(before);
  });

  test('leaves nothing behind: not kept, not indexed, no referrer, no cookie', async () => {
    const { token } = await bookJob(app, shop);
    for (const answer of [await open(token), await open('nonsense'), await visitor(app).get(`/t/${token}`)]) {
      expect(answer.headers['cache-control']).toBe('no-store');
      expect(answer.headers['x-robots-tag']).toContain('noindex');
      expect(answer.headers['referrer-policy']).toBe('no-referrer');
      expect(answer.headers['set-cookie']).toBeUndefined();
    }
    expect(app.log.join('')).not.toContain(token);
  });
});

describe('the end of a link', () => {
  const expectEnded = async (token: string) => {
    const answer = await open(token);
    expect([answer.status, errorOf(answer).code]).toEqual([410, 'link_ended']);
    const { name, slug } = shop;
    const phone = shop.settings.phone;
    expect(errorOf(answer).details).toEqual({ shop: { slug, name, phone } } satisfies LinkEndedDetails);
    expect(answer.text).not.toContain('Pellmar');
  };

  test('when it is taken back; the others of the visit go on', async () => {
    const booked = await bookJobs(app, shop);
    const found = await find(booked.stubCode, shop.manager.phone?.slice(-4)).expect(200);
    const other = (found.body as FindStubAnswer).stubPath.slice(3);
    await withShop(shop.id, () =>
      Link.update({ revokedAt: app.clock.now() }, { where: { visitId: booked.visitId, purpose: 'screen' } }),
    );
    await expectEnded(tokenOf(booked));
    await open(other).expect(200);
  });

  test('ninety days after the last machine has ended, and not before', async () => {
    const machines = [newMachine(shop), newMachine(shop)];
    const booked = await bookJobs(app, shop, { machines });
    const [one = '', two = ''] = booked.jobs.map(({ tag }) => tag);
    await bringTo(owner, one, 'collected');
    pass(app, 100 * DAY);
    await open(tokenOf(booked)).expect(200);
    owner = await signedIn(app, shop, shop.staff.owner);
    await bringTo(owner, two, 'collected');
    pass(app, 90 * DAY);
    await open(tokenOf(booked)).expect(200);
    pass(app, 1);
    await expectEnded(tokenOf(booked));
  });

  test('an end that is taken back opens it again', async () => {
    const { tag, token } = await bookJob(app, shop);
    await bringTo(owner, tag, 'collected');
    pass(app, 91 * DAY);
    await expectEnded(token);
    owner = await signedIn(app, shop, shop.staff.owner);
    const { job } = await sheetOf(owner, tag);
    const body = { version: job.version, to: 'ready', reason: 'never collected', tell: false };
    await postAct(owner, tag, 'corrections', body).expect(200);
    pass(app, GRACE);
    expect(firstOf(await read(token))?.stage).toBe('ready');
  });

  test('a cancelled visit ends like any other', async () => {
    const { tag, token } = await bookJob(app, shop);
    expect((await postMove(owner, tag, 'cancelled')).status).toBe(200);
    pass(app, GRACE);
    expect(firstOf(await read(token))?.stage).toBe('cancelled');
    pass(app, 90 * DAY);
    await expectEnded(token);
  });

  test('a suspended shop’s links are unknown', async () => {
    const { token } = await bookJob(app, shop);
    await suspend(app, shop.id, app.clock.now());
    expect((await open(token)).status).toBe(404);
    await suspend(app, shop.id, null);
    expect(await Shop.count({ where: { suspendedAt: null } })).toBe(1);
    await open(token).expect(200);
  });
});

/** Looks a visit up by what is printed on its stub. */
const find = (code: string, lastFour: string | undefined) =>
  visitor(app).post(`/api/shops/${shop.slug}/stubs`).send({ code, lastFour });

describe('by the printed code', () => {
  test('as it is typed, with the last four digits of a phone of the visit', async () => {
    const { stubCode, tag } = await bookJob(app, shop);
    const typed = ` ${stubCode.slice(0, 3).toLowerCase()}-${stubCode.slice(3)} `;
    const { stubPath } = (await find(typed, shop.manager.phone?.slice(-4)).expect(200))
      .body as FindStubAnswer;
    expect((await read(stubPath.slice(3))).stubCode).toBe(stubCode);
    const checkIn = { ...atGate, broughtByName: '', broughtByPersonId: shop.crewLead.id };
    const lead = shop.crewLead.phone?.slice(-4);
    expect((await find(stubCode, lead)).status).toBe(404);
    await postMove(owner, tag, 'checked_in', { checkIn });
    await find(stubCode, lead).expect(200);
  });

  test('a wrong code and wrong digits are answered alike', async () => {
    const { stubCode } = await bookJob(app, shop);
    const wrongDigits = await find(stubCode, '9999');
    const wrongCode = await find('7K4QM2', shop.manager.phone?.slice(-4));
    expect([wrongDigits.status, wrongCode.status]).toEqual([404, 404]);
    const saying = ({ code, message }: { code: string; message: string }) => ({ code, message });
    expect(saying(errorOf(wrongCode))).toEqual(saying(errorOf(wrongDigits)));
  });
});

test('the bell rings for repaired alone: every other outcome is named', async () => {
  const { tag, token } = await bookJob(app, shop);
  await bringTo(owner, tag, 'checked_in');
  const lines = [met('asked_to_stop')];
  const moved = await postMove(owner, tag, 'ready', { outcome: 'given_back', lines });
  expect((moved.body as MoveAnswer).job.outcome).toBe('given_back');
  pass(app, GRACE);
  expect(firstOf(await read(token))).toMatchObject({ stage: 'ready', outcome: 'given_back' });
});
