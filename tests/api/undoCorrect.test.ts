/** Taking a move back while nobody has heard of it, and correcting one when somebody may have. */
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { rows, withShop } from '#server/lib/db';
import { Message, Notice, VisitEvent } from '#server/models/index';
import type { MoveAnswer } from '#shared/schemas/job';
import { makeShop, type TestShop } from '../support/factories';
import {
  atGate,
  bookJob,
  bringTo,
  errorOf,
  faultsOf,
  met,
  newKey,
  postAct,
  postMove,
  sheetOf,
} from '../support/jobs';
import { pass, signedIn, startTestApp, THURSDAY_NINE, type Client, type TestApp } from '../support/testApp';

const HOUR = 60 * 60_000;
const GRACE = 60_000;

let app: TestApp;
let shop: TestShop;
let clients: Record<'counter' | 'mechanic' | 'owner', Client>;
/** Staff sessions end with their day, so each test signs in on its own. */
const signInAll = async () => ({
  counter: await signedIn(app, shop, shop.staff.counter),
  mechanic: await signedIn(app, shop, shop.staff.mechanic),
  owner: await signedIn(app, shop, shop.staff.owner),
});

beforeAll(async () => {
  app = await startTestApp();
  shop = await makeShop(app, { placesPerHalfDay: 2 });
});
beforeEach(async () => {
  app.clock.set(THURSDAY_NINE);
  clients = await signInAll();
});
afterAll(() => app.stop());

/** Each booking gets a half-day of its own. */
const DAYS = [
  '07',
  '08',
  '09',
  '10',
  '11',
  '14',
  '15',
  '16',
  '17',
  '18',
  '21',
  '22',
  '23',
  '24',
  '28',
  '29',
  '30',
];
let used = 0;
const ownHalfDay = (): string => {
  const day = DAYS[Math.floor(used / 2) % DAYS.length] ?? '';
  return `2026-12-${day}T${used++ % 2 === 0 ? '16:00' : '20:30'}:00.000Z`;
};
const booked = () => bookJob(app, shop, { arrivesAt: ownHalfDay() });
const undo = (client: Client, tag: string, eventId: string | undefined, key = newKey()) =>
  postAct(client, tag, 'undo', { eventId }, key);
const eventOf = (answer: MoveAnswer) => answer.job.undo?.eventId;

describe('undo', () => {
  test('puts everything back as it was', async () => {
    const { tag } = await booked();
    await bringTo(clients.owner, tag, 'diagnosis');
    pass(app, 2 * GRACE);
    await postMove(clients.mechanic, tag, 'awaiting_parts', { partsReason: 'outside_work' });
    pass(app, 2 * GRACE);
    const before = (await sheetOf(clients.mechanic, tag)).job;
    const wrong = (await postMove(clients.mechanic, tag, 'diagnosis')).body as MoveAnswer;
    pass(app, GRACE - 1);
    const answer = await undo(clients.mechanic, tag, eventOf(wrong));
    expect(answer.status).toBe(200);
    const { job } = answer.body as MoveAnswer;
    expect(before).toMatchObject({ ...job, version: job.version - 2 });
    expect(job).toMatchObject({ stage: 'awaiting_parts', partsReason: 'outside_work' });
  });

  test('of a check-in forgets who brought it, and its notices never go', async () => {
    const { tag, visitId } = await booked();
    const checkIn = { ...atGate, leftWithIt: 'hose' };
    const moved = (await postMove(clients.counter, tag, 'checked_in', { checkIn })).body as MoveAnswer;
    expect(moved.held).toHaveLength(1);
    const answer = (await undo(clients.counter, tag, eventOf(moved))).body as MoveAnswer;
    expect([answer.job.stage, answer.held]).toEqual(['booked', []]);
    const { job, history } = await sheetOf(clients.counter, tag);
    expect([job.broughtBy, job.leftWithIt]).toEqual([null, '']);
    expect(history.map(({ kind, undone }) => [kind, undone])).toEqual([
      ['booked', false],
      ['moved', true],
      ['undone', false],
    ]);
    const notices = await withShop(shop.id, () => Notice.findAll({ where: { visitId, kind: 'checked_in' } }));
    expect(notices.map(({ state }) => state)).toEqual(['withdrawn']);
    const messages = await withShop(shop.id, () =>
      Message.findAll({ where: { id: notices.map(({ messageId }) => messageId) } }),
    );
    expect(messages.map(({ status }) => status)).toEqual(['withdrawn']);
  });

  test('of ready takes the outcome back and voids its line', async () => {
    const { tag } = await booked();
    const ready = await bringTo(clients.owner, tag, 'ready');
    const answer = (await undo(clients.owner, tag, eventOf(ready))).body as MoveAnswer;
    expect(answer.job).toMatchObject({ stage: 'test_run', outcome: null });
    const { lines } = await sheetOf(clients.owner, tag);
    expect(lines.map(({ guard, voided }) => [guard, voided])).toContainEqual(['passing_run', true]);
    expect(lines.filter(({ voided }) => voided)).toHaveLength(1);
  });

  test('comes too late when the grace is over', async () => {
    const { tag } = await booked();
    const moved = await bringTo(clients.owner, tag, 'checked_in');
    pass(app, GRACE);
    expect((await sheetOf(clients.owner, tag)).job.undo).toBeNull();
    const answer = await undo(clients.owner, tag, eventOf(moved));
    expect([answer.status, errorOf(answer).code]).toEqual([409, 'too_late']);
    expect((await sheetOf(clients.owner, tag)).job.stage).toBe('checked_in');
  });

  test('is for the latest move only, and once', async () => {
    const { tag } = await booked();
    const first = await bringTo(clients.owner, tag, 'checked_in');
    const second = (await postMove(clients.owner, tag, 'diagnosis', { lines: [met('walk_round')] }))
      .body as MoveAnswer;
    expect(errorOf(await undo(clients.owner, tag, eventOf(first))).code).toBe('too_late');
    await undo(clients.owner, tag, eventOf(second)).expect(200);
    expect(errorOf(await undo(clients.owner, tag, eventOf(second))).code).toBe('too_late');
    // The move before is the latest that stands now, and its grace still lasts.
    await undo(clients.owner, tag, eventOf(first)).expect(200);
    expect((await sheetOf(clients.owner, tag)).job.stage).toBe('booked');
  });

  test('a booking is not a move, and an event of another job is none of this one', async () => {
    const one = await booked();
    const other = await booked();
    const moved = await bringTo(clients.owner, other.tag, 'checked_in');
    const { history } = await sheetOf(clients.owner, one.tag);
    expect(errorOf(await undo(clients.owner, one.tag, history[0]?.id)).code).toBe('too_late');
    expect(errorOf(await undo(clients.owner, one.tag, eventOf(moved))).code).toBe('too_late');
  });

  test('is for whoever may make that move', async () => {
    const { tag } = await booked();
    const cancelled = (await postMove(clients.counter, tag, 'cancelled')).body as MoveAnswer;
    expect((await sheetOf(clients.mechanic, tag)).job.undo).toBeNull();
    const answer = await undo(clients.mechanic, tag, eventOf(cancelled));
    expect([answer.status, errorOf(answer).code]).toEqual([403, 'forbidden']);
  });

  test('twice at once, or with the same key again, takes back once', async () => {
    const { tag } = await booked();
    const moved = await bringTo(clients.owner, tag, 'checked_in');
    const both = await Promise.all([1, 2].map(() => undo(clients.owner, tag, eventOf(moved))));
    expect(both.map(({ status }) => status).sort()).toEqual([200, 409]);
    const key = newKey();
    const again = await bringTo(clients.owner, tag, 'checked_in');
    const first = await undo(clients.owner, tag, eventOf(again), key).expect(200);
    expect((await undo(clients.owner, tag, eventOf(again), key)).body).toEqual(first.body);
  });
});

interface Half {
  taken: number;
  over: number;
}
const halfDayOf = async (arrivesAt: string): Promise<Half | undefined> => {
  const half = arrivesAt.includes('T16') ? 'am' : 'pm';
  const bind = [arrivesAt.slice(0, 10), half];
  const [found] = await withShop(shop.id, () =>
    rows<Half>('select taken, over from half_days where day = $1 and half = $2', bind),
  );
  return found;
};

describe('places', () => {
  test('a cancel gives the place back, its undo takes it again', async () => {
    const { tag, arrivesAt } = await booked();
    expect(await halfDayOf(arrivesAt)).toEqual({ taken: 1, over: 0 });
    const moved = (await postMove(clients.counter, tag, 'cancelled')).body as MoveAnswer;
    expect(await halfDayOf(arrivesAt)).toEqual({ taken: 0, over: 0 });
    await undo(clients.counter, tag, eventOf(moved)).expect(200);
    expect(await halfDayOf(arrivesAt)).toEqual({ taken: 1, over: 0 });
  });

  test('where the place is gone meanwhile, the half-day holds one more, with who and why', async () => {
    const { tag, arrivesAt } = await booked();
    await bookJob(app, shop, { arrivesAt });
    const moved = (await postMove(clients.counter, tag, 'cancelled')).body as MoveAnswer;
    await bookJob(app, shop, { arrivesAt });
    await undo(clients.counter, tag, eventOf(moved)).expect(200);
    expect(await halfDayOf(arrivesAt)).toEqual({ taken: 3, over: 1 });
    const events = await withShop(shop.id, () =>
      rows<{ by_name: string; places: number; reason: string }>(
        'select by_name, places, reason from half_day_events order by at desc limit 1',
      ),
    );
    expect(events[0]).toMatchObject({ by_name: shop.staff.counter.name, places: 1 });
    expect(events[0]?.reason).not.toBe('');
  });

  test('a no-show keeps its place: the half-day was held for it', async () => {
    const { tag, arrivesAt } = await booked();
    expect((await postMove(clients.counter, tag, 'no_show')).status).toBe(200);
    expect(await halfDayOf(arrivesAt)).toEqual({ taken: 1, over: 0 });
  });

  test('one machine of a visit is cancelled as one event of the visit', async () => {
    const { tag, visitId } = await booked();
    await postMove(clients.counter, tag, 'cancelled');
    const events = await withShop(shop.id, () => VisitEvent.findAll({ where: { visitId }, order: ['at'] }));
    expect(events.map(({ kind }) => kind).sort()).toEqual(['booked', 'cancelled']);
  });
});

describe('correct', () => {
  const correct = async (client: Client, tag: string, to: string, more: object = {}) => {
    const { job } = await sheetOf(clients.owner, tag);
    const body = { version: job.version, to, reason: 'it was the other one', tell: false, ...more };
    return postAct(client, tag, 'corrections', body);
  };

  test('to any earlier stage, with a reason, and the lines are void', async () => {
    const { tag } = await booked();
    await bringTo(clients.owner, tag, 'ready');
    pass(app, HOUR / 10);
    const answer = await correct(clients.mechanic, tag, 'diagnosis');
    expect((answer.body as MoveAnswer).job).toMatchObject({ stage: 'diagnosis', outcome: null });
    const { lines, history } = await sheetOf(clients.mechanic, tag);
    expect(lines.map(({ guard, voided }) => [guard, voided])).toEqual([
      ['walk_round', false],
      ['approval', true],
      ['passing_run', true],
    ]);
    expect(history.at(-1)).toMatchObject({
      kind: 'corrected',
      from: 'ready',
      to: 'diagnosis',
      by: shop.staff.mechanic.name,
      reason: 'it was the other one',
    });
  });

  test('never forward or to where it stands, and never without a reason', async () => {
    const { tag } = await booked();
    await bringTo(clients.owner, tag, 'diagnosis');
    for (const to of ['diagnosis', 'repair', 'cancelled']) {
      expect(faultsOf(await correct(clients.owner, tag, to))).toEqual(['to']);
    }
    expect(faultsOf(await correct(clients.owner, tag, 'booked', { reason: ' \n' }))).toEqual(['reason']);
    const late = await correct(clients.owner, tag, 'booked', { version: 1 });
    expect([late.status, errorOf(late).code]).toEqual([409, 'moved_meanwhile']);
  });

  test('an end: the counter on the same day, the owner later, the mechanic never', async () => {
    const { tag } = await booked();
    await bringTo(clients.owner, tag, 'collected');
    expect((await sheetOf(clients.mechanic, tag)).correctTo).toEqual([]);
    expect((await correct(clients.mechanic, tag, 'ready')).status).toBe(403);
    const sameDay = await correct(clients.counter, tag, 'ready');
    expect((sameDay.body as MoveAnswer).job).toMatchObject({ stage: 'ready', outcome: 'repaired' });
    const lines = [met('hand_over'), met('who_may_collect'), met('paid', { amountCents: 1 })];
    expect((await postMove(clients.owner, tag, 'collected', { lines })).status).toBe(200);
    pass(app, 24 * HOUR);
    clients = await signInAll();
    expect((await sheetOf(clients.counter, tag)).correctTo).toEqual([]);
    expect((await correct(clients.counter, tag, 'ready')).status).toBe(403);
    expect((await correct(clients.owner, tag, 'ready')).status).toBe(200);
  });

  test('of a cancelled booking takes its place again', async () => {
    const { tag, arrivesAt } = await booked();
    await postMove(clients.counter, tag, 'cancelled');
    pass(app, 2 * GRACE);
    expect((await correct(clients.counter, tag, 'booked')).status).toBe(200);
    expect(await halfDayOf(arrivesAt)).toEqual({ taken: 1, over: 0 });
  });

  test('of a cancelled machine that is booked anew meanwhile is refused whole', async () => {
    const arrivesAt = ownHalfDay();
    const machine = shop.machines[3]?.id;
    const machines = [
      { from: 'fleet', machineId: machine, complaintKindId: shop.complaintKinds[0]?.id, words: '' },
    ];
    const { tag } = await bookJob(app, shop, { arrivesAt, machines });
    await postMove(clients.counter, tag, 'cancelled');
    await bookJob(app, shop, { arrivesAt, machines });
    pass(app, 2 * GRACE);
    const answer = await correct(clients.counter, tag, 'booked');
    expect([answer.status, errorOf(answer).code]).toEqual([409, 'machine_has_open_job']);
    expect(await halfDayOf(arrivesAt)).toEqual({ taken: 1, over: 0 });
  });

  describe('who has been told', () => {
    /** As the worker leaves a message that the gateway took. */
    const sendAll = (visitId: string) =>
      withShop(shop.id, () =>
        Message.update(
          { status: 'accepted', delivery: 'delivered', settledAt: app.clock.now() },
          { where: { visitId, status: 'pending' } },
        ),
      );
    const noticesOf = (visitId: string) =>
      withShop(shop.id, async () => {
        const found = await Notice.findAll({ where: { visitId }, order: ['createdAt'] });
        return found.map(({ kind, state }) => `${kind} ${state}`);
      });

    test('what has not gone is withdrawn, and nobody is told anything', async () => {
      const { tag, visitId } = await booked();
      await sendAll(visitId);
      await bringTo(clients.owner, tag, 'checked_in');
      expect((await sheetOf(clients.owner, tag)).told).toEqual([]);
      await correct(clients.owner, tag, 'booked', { tell: true });
      expect(await noticesOf(visitId)).toContain('checked_in withdrawn');
      expect((await noticesOf(visitId)).filter((notice) => notice.startsWith('corrected'))).toEqual([]);
    });

    test('who has heard is named, and gets one text when asked for', async () => {
      const { tag, visitId } = await booked();
      await bringTo(clients.owner, tag, 'checked_in');
      pass(app, 2 * GRACE);
      await sendAll(visitId);
      const { told } = await sheetOf(clients.owner, tag);
      expect(told.map(({ personId, channel }) => [personId, channel])).toEqual([[shop.manager.id, 'text']]);
      const answer = await correct(clients.owner, tag, 'booked', { tell: true });
      expect((answer.body as MoveAnswer).held.map(({ personName }) => personName)).toEqual([
        shop.manager.name,
      ]);
      expect((await noticesOf(visitId)).filter((notice) => notice === 'corrected standing')).toHaveLength(1);
    });

    test('each correction is named that would make wrong what was heard', async () => {
      const { tag, visitId } = await booked();
      await bringTo(clients.owner, tag, 'checked_in');
      pass(app, 2 * GRACE);
      await sendAll(visitId);
      await postMove(clients.owner, tag, 'diagnosis', { lines: [met('walk_round')] });
      await postMove(clients.owner, tag, 'test_run');
      const { told, correctTo } = await sheetOf(clients.owner, tag);
      expect(correctTo).toEqual(expect.arrayContaining(['booked', 'checked_in', 'diagnosis']));
      // That it came in stays true wherever in the shop it is put back to.
      expect(told.map(({ wrongAfter }) => wrongAfter)).toEqual([['booked']]);
    });

    test('and gets none when not', async () => {
      const { tag, visitId } = await booked();
      await bringTo(clients.owner, tag, 'checked_in');
      pass(app, 2 * GRACE);
      await sendAll(visitId);
      const answer = await correct(clients.owner, tag, 'booked');
      expect((answer.body as MoveAnswer).held).toEqual([]);
      expect((await noticesOf(visitId)).filter((notice) => notice.startsWith('corrected'))).toEqual([]);
    });
  });
});
