/** What staff read: today at the gate, the Rail, and the sheet of one job. */
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import type { FleetView } from '#shared/schemas/booking';
import type { GateView, JobSheet, RailView } from '#shared/schemas/job';
import { makeShop, type TestShop } from '../support/factories';
import { bookJob, bookJobs, bringTo, newMachine, postAct, postMove, sheetOf } from '../support/jobs';
import { pass, signedIn, startTestApp, THURSDAY_NINE, type Client, type TestApp } from '../support/testApp';

const DAY = 24 * 60 * 60_000;
/** Eleven in the morning and half past three, on the Thursday of the tests' clock. */
const AT_ELEVEN = '2026-12-03T18:00:00.000Z';
const AT_HALF_PAST_THREE = '2026-12-03T22:30:00.000Z';

let app: TestApp;
let shop: TestShop;
let counter: Client;
let mechanic: Client;

beforeAll(async () => {
  app = await startTestApp();
});
beforeEach(async () => {
  app.clock.set(THURSDAY_NINE);
  // A shop for each test: these lists show everything that a shop has.
  shop = await makeShop(app, { placesPerHalfDay: 200 });
  counter = await signedIn(app, shop, shop.staff.counter);
  mechanic = await signedIn(app, shop, shop.staff.mechanic);
});
afterAll(() => app.stop());

const gate = async (client = counter) => (await client.get('/api/shop/gate').expect(200)).body as GateView;
const rail = async (client = counter) => (await client.get('/api/shop/rail').expect(200)).body as RailView;
const tagsOf = (view: RailView) => view.jobs.map(({ tag }) => tag);

describe('Gate', () => {
  test('today’s visits in order of arrival, machine by machine', async () => {
    const late = await bookJob(app, shop, { arrivesAt: AT_HALF_PAST_THREE, note: 'two trucks' });
    const machines = [newMachine(shop, { fleetNumber: '1' }), newMachine(shop, { fleetNumber: '2' })];
    const early = await bookJobs(app, shop, { arrivesAt: AT_ELEVEN, machines });
    await bookJob(app, shop);
    const view = await gate();
    expect(view.date).toBe('2026-12-03');
    expect(view.visits.map(({ id }) => id)).toEqual([early.visitId, late.visitId]);
    const [first, second] = view.visits;
    expect(first?.jobs.map(({ tag }) => tag)).toEqual(early.jobs.map(({ tag }) => tag));
    expect(first?.jobs.map(({ machine }) => machine.fleetNumber)).toEqual(['1', '2']);
    expect(second).toMatchObject({
      stubCode: late.stubCode,
      arrivesAt: AT_HALF_PAST_THREE,
      account: { id: shop.account.id, name: shop.account.name },
      bookedBy: { id: shop.manager.id, name: shop.manager.name, phone: shop.manager.phone },
      note: 'two trucks',
    });
    expect(second?.people.map(({ name }) => name).sort()).toEqual(
      [shop.manager, shop.crewLead, shop.bookkeeper].map(({ name }) => name).sort(),
    );
    expect(view.unanswered).toEqual([]);
  });

  test('what is ticked in says when; what is cancelled is not expected', async () => {
    const { tag } = await bookJob(app, shop, { arrivesAt: AT_ELEVEN });
    const gone = await bookJob(app, shop, { arrivesAt: AT_ELEVEN });
    await bringTo(counter, tag, 'checked_in');
    expect((await postMove(counter, gone.tag, 'cancelled')).status).toBe(200);
    const { visits } = await gate();
    expect(visits).toHaveLength(1);
    expect(visits[0]?.jobs[0]).toMatchObject({
      tag,
      stage: 'checked_in',
      checkedInAt: app.clock.now().toISOString(),
      version: 2,
    });
  });

  test('the day is that of the shop’s own calendar', async () => {
    await bookJob(app, shop, { arrivesAt: AT_ELEVEN });
    app.clock.set(new Date('2026-12-04T06:39:00Z'));
    counter = await signedIn(app, shop, shop.staff.counter);
    expect([(await gate()).date, (await gate()).visits.length]).toEqual(['2026-12-03', 1]);
    pass(app, 20 * 60_000);
    expect([(await gate()).date, (await gate()).visits.length]).toEqual(['2026-12-03', 1]);
    app.clock.set(new Date('2026-12-04T07:00:00Z'));
    expect([(await gate()).date, (await gate()).visits.length]).toEqual(['2026-12-04', 0]);
  });
});

describe('Rail', () => {
  test('open jobs, longest in their stage first, with what a tag shows', async () => {
    const one = await bookJob(app, shop, { arrivesAt: AT_ELEVEN });
    const two = await bookJob(app, shop, { arrivesAt: AT_HALF_PAST_THREE });
    await bringTo(counter, one.tag, 'checked_in');
    pass(app, 5 * 60_000);
    await bringTo(counter, two.tag, 'diagnosis');
    const view = await rail();
    expect(tagsOf(view)).toEqual([one.tag, two.tag]);
    expect(view.jobs[0]).toMatchObject({
      stage: 'checked_in',
      version: 2,
      stageSince: THURSDAY_NINE.toISOString(),
      account: { name: shop.account.name },
      complaint: shop.complaintKinds[0]?.labelEn,
      words: 'stalls',
      arrivesAt: AT_ELEVEN,
      outcome: null,
    });
    expect(view.unpaidLimitCents).toBe(shop.settings.unpaidLimitCents);
    expect(view.pegs).toEqual({ diagnosis: 2, repair: 2, test_run: 1 });
  });

  test('booked ones of the next five working days', async () => {
    const within = await bookJob(app, shop, { arrivesAt: '2026-12-09T22:30:00.000Z' });
    const beyond = await bookJob(app, shop, { arrivesAt: '2026-12-10T14:30:00.000Z' });
    expect(tagsOf(await rail())).toEqual([within.tag]);
    pass(app, DAY);
    counter = await signedIn(app, shop, shop.staff.counter);
    expect(tagsOf(await rail())).toEqual([within.tag, beyond.tag]);
  });

  test('no machine that stands in the shop ever leaves it; what is collected stays for the day', async () => {
    const stays = await bookJob(app, shop, { arrivesAt: AT_ELEVEN });
    const goes = await bookJob(app, shop, { arrivesAt: AT_ELEVEN });
    const cancelled = await bookJob(app, shop, { arrivesAt: AT_ELEVEN });
    await bringTo(counter, stays.tag, 'checked_in');
    await bringTo(counter, goes.tag, 'collected');
    await postMove(counter, cancelled.tag, 'cancelled');
    expect(tagsOf(await rail()).sort()).toEqual([stays.tag, goes.tag].sort());
    pass(app, DAY);
    counter = await signedIn(app, shop, shop.staff.counter);
    expect(tagsOf(await rail())).toEqual([stays.tag]);
    pass(app, 400 * DAY);
    counter = await signedIn(app, shop, shop.staff.counter);
    expect(tagsOf(await rail())).toEqual([stays.tag]);
  });

  test('each tag says what its reader may do with it', async () => {
    const { tag } = await bookJob(app, shop);
    const owner = await signedIn(app, shop, shop.staff.owner);
    await bringTo(owner, tag, 'collected');
    const abilitiesFor = async (client: Client) => (await sheetOf(client, tag)).job.abilities;
    expect(await abilitiesFor(counter)).toEqual(['job.view', 'job.correct', 'job.note']);
    expect(await abilitiesFor(mechanic)).toEqual(['job.view', 'job.note']);
    const { jobs } = await rail(mechanic);
    expect(jobs.find((job) => job.tag === tag)?.abilities).toEqual(['job.view', 'job.note']);
  });

  test('undo is offered while it can be done, to whoever may', async () => {
    const { tag } = await bookJob(app, shop, { arrivesAt: AT_ELEVEN });
    expect((await rail()).jobs[0]?.undo).toBeNull();
    const moved = await postMove(counter, tag, 'no_show');
    expect(moved.status).toBe(200);
    expect((await sheetOf(counter, tag)).job.undo).toMatchObject({ until: '2026-12-03T16:01:00.000Z' });
    expect((await sheetOf(mechanic, tag)).job.undo).toBeNull();
    pass(app, 60_000);
    expect((await sheetOf(counter, tag)).job.undo).toBeNull();
  });
});

describe('job sheet', () => {
  test('people, history, notes and notices of one job', async () => {
    const { tag, stubCode, visitId } = await bookJob(app, shop, { arrivesAt: AT_ELEVEN, note: 'two trucks' });
    await postAct(mechanic, tag, 'notes', { body: 'governor spring\nis worn' }).expect(200);
    await bringTo(counter, tag, 'checked_in');
    const sheet = await sheetOf(counter, tag);
    expect(sheet.job).toMatchObject({
      tag,
      visit: { id: visitId, stubCode, note: 'two trucks' },
      billed: { id: shop.account.id, name: shop.account.name },
      broughtBy: 'Ray',
    });
    expect(sheet.people.map(({ id, texts }) => [id, texts])).toEqual([[shop.manager.id, 'on']]);
    expect(sheet.notes).toMatchObject([{ by: shop.staff.mechanic.name, body: 'governor spring\nis worn' }]);
    expect(sheet.history.map(({ kind, from, to, by }) => [kind, from, to, by])).toEqual([
      ['booked', null, 'booked', shop.manager.name],
      ['moved', 'booked', 'checked_in', shop.staff.counter.name],
    ]);
    expect(sheet.notices.map(({ kind, channel }) => `${kind} ${channel}`).sort()).toEqual([
      'booked email',
      'booked text',
      'checked_in text',
    ]);
    const held = sheet.notices.find(({ kind }) => kind === 'checked_in');
    expect([held?.state, held?.releaseAt]).toEqual(['held', '2026-12-03T16:01:00.000Z']);
  });

  test('offers each the corrections that are his', async () => {
    const { tag } = await bookJob(app, shop, { arrivesAt: AT_ELEVEN });
    expect((await sheetOf(mechanic, tag)).correctTo).toEqual([]);
    await bringTo(counter, tag, 'diagnosis');
    expect((await sheetOf(mechanic, tag)).correctTo).toEqual(['booked', 'checked_in']);
  });

  test('a partly repaired machine says what is left, until it is worked on again', async () => {
    const { tag } = await bookJob(app, shop);
    await bringTo(counter, tag, 'test_run');
    const left = { guard: 'what_is_left', mode: 'met', how: 'belt is worn, new one is on order' };
    await postMove(counter, tag, 'ready', { outcome: 'partly_repaired', lines: [left] });
    expect((await sheetOf(counter, tag)).job.outcomeNote).toBe('belt is worn, new one is on order');
    await postMove(counter, tag, 'repair');
    expect((await sheetOf(counter, tag)).job.outcomeNote).toBe('');
  });

  test('a note counts once, however often it is sent', async () => {
    const { tag } = await bookJob(app, shop, { arrivesAt: AT_ELEVEN });
    const key = 'one-note-only';
    const first = await postAct(mechanic, tag, 'notes', { body: 'once' }, key).expect(200);
    expect((await postAct(mechanic, tag, 'notes', { body: 'once' }, key)).body).toEqual(first.body);
    expect((await sheetOf(mechanic, tag)).notes).toHaveLength(1);
    await postAct(counter, tag, 'notes', { body: 'once' }, key).expect(422);
  });

  test('is found by the code however it is typed', async () => {
    const { tag } = await bookJob(app, shop, { arrivesAt: AT_ELEVEN });
    const typed = `${tag.slice(0, 3).toLowerCase()}-${tag.slice(3)}`;
    const answer = await counter.get(`/api/shop/jobs/${typed}`).expect(200);
    expect((answer.body as JobSheet).job.tag).toBe(tag);
  });
});

describe('fleet', () => {
  const fleet = async (client: Client) => {
    const { machines } = (await client.get('/api/fleet').expect(200)).body as FleetView;
    return machines.map(({ fleetNumber, openStage }) => [fleetNumber, openStage]);
  };

  test('a manager sees the account’s machines, a crew lead those of the crew, with where they are', async () => {
    const machine = { from: 'fleet', machineId: shop.machines[1]?.id, words: '' };
    const machines = [{ ...machine, complaintKindId: shop.complaintKinds[0]?.id }];
    await bookJobs(app, shop, { machines, arrivesAt: AT_ELEVEN });
    expect(await fleet(await signedIn(app, shop, shop.manager))).toEqual([
      ['1', null],
      ['2', 'booked'],
      ['3', null],
      ['4', null],
    ]);
    expect(await fleet(await signedIn(app, shop, shop.crewLead))).toEqual([
      ['1', null],
      ['2', 'booked'],
    ]);
  });

  test('customers read its open stage after the grace, like everything else', async () => {
    const machine = { from: 'fleet', machineId: shop.machines[0]?.id, words: '' };
    const machines = [{ ...machine, complaintKindId: shop.complaintKinds[0]?.id }];
    const { jobs } = await bookJobs(app, shop, { machines, arrivesAt: AT_ELEVEN });
    await bringTo(counter, jobs[0]?.tag ?? '', 'checked_in');
    const manager = await signedIn(app, shop, shop.manager);
    expect((await fleet(manager))[0]).toEqual(['1', 'booked']);
    pass(app, 60_000);
    expect((await fleet(manager))[0]).toEqual(['1', 'checked_in']);
  });
});
