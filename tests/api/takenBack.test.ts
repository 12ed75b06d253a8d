/** What is taken back leaves nothing behind: on the public page, on tags, in what people were told, in the fleet. */
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { withShop } from '#server/lib/db';
import { newId, pick } from '#server/lib/ids';
import { Message, Tag } from '#server/models/index';
import { drawCode } from '#shared/domain/tagCode';
import type { MoveAnswer } from '#shared/schemas/job';
import type { StubView } from '#shared/schemas/stub';
import { makeShop, type TestShop } from '../support/factories';
import { atGate, bookJob, bringTo, errorOf, postAct, postMove, sheetOf } from '../support/jobs';
import {
  pass,
  signedIn,
  startTestApp,
  THURSDAY_NINE,
  visitor,
  type Client,
  type TestApp,
} from '../support/testApp';

const GRACE = 60_000;

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

const undo = (tag: string, moved: MoveAnswer) =>
  postAct(owner, tag, 'undo', { eventId: moved.job.undo?.eventId });
async function correct(tag: string, to: string) {
  const { job } = await sheetOf(owner, tag);
  return postAct(owner, tag, 'corrections', { version: job.version, to, reason: 'wrong tag', tell: false });
}
async function stubOf(token: string) {
  const view = (await visitor(app).get(`/api/t/${token}`).expect(200)).body as StubView;
  const [machine] = view.machines;
  return { stage: machine?.stage, history: machine?.history.map(({ stage }) => stage) };
}

describe('a move corrected within its grace', () => {
  test('is never seen by the public, not even for the moment between the two', async () => {
    const { tag, token } = await bookJob(app, shop);
    await bringTo(owner, tag, 'test_run');
    pass(app, 2 * GRACE);
    const before = await stubOf(token);
    await bringToReady(tag);
    pass(app, GRACE / 2);
    expect((await correct(tag, 'test_run')).status).toBe(200);
    pass(app, GRACE / 2);
    expect(await stubOf(token)).toEqual(before);
    pass(app, GRACE);
    expect((await stubOf(token)).history).not.toContain('ready');
    expect((await stubOf(token)).stage).toBe('test_run');
  });

  test('one that the public has seen stays in the history', async () => {
    const { tag, token } = await bookJob(app, shop);
    await bringTo(owner, tag, 'ready');
    pass(app, 2 * GRACE);
    await correct(tag, 'test_run');
    pass(app, GRACE);
    expect((await stubOf(token)).history?.slice(-2)).toEqual(['ready', 'test_run']);
  });

  const bringToReady = (tag: string) =>
    postMove(owner, tag, 'ready', {
      outcome: 'repaired',
      lines: [{ guard: 'passing_run', mode: 'met', how: 'two cycles' }],
    });
});

test('a wrong step backwards can be corrected, with the outcome that the job had', async () => {
  const { tag } = await bookJob(app, shop);
  await bringTo(owner, tag, 'ready');
  pass(app, 2 * GRACE);
  await postMove(owner, tag, 'diagnosis');
  pass(app, 2 * GRACE);
  expect((await sheetOf(owner, tag)).correctTo).toContain('ready');
  const { job } = (await correct(tag, 'ready')).body as MoveAnswer;
  expect(job).toMatchObject({ stage: 'ready', outcome: 'repaired' });
  const { lines } = await sheetOf(owner, tag);
  expect(lines.filter(({ voided }) => voided)).toEqual([]);
});

describe('a tag hung at a check-in that was none', () => {
  const hangBlank = async (tag: string) => {
    const code = drawCode(pick);
    const fromAt = app.clock.now();
    await withShop(shop.id, () => Tag.create({ shopId: shop.id, id: newId(), code, fromAt }));
    const answer = await postMove(owner, tag, 'checked_in', { checkIn: { ...atGate, newTag: code } });
    expect(answer.status).toBe(200);
    return { code, moved: answer.body as MoveAnswer };
  };

  test.each([
    ['undone', (tag: string, moved: MoveAnswer) => undo(tag, moved)],
    ['corrected', (tag: string) => correct(tag, 'booked')],
  ])('%s: it is a blank again, and can be hung on the right machine', async (_how, takeBack) => {
    const wrong = await bookJob(app, shop);
    const right = await bookJob(app, shop);
    const { code, moved } = await hangBlank(wrong.tag);
    const answer = await takeBack(code, moved);
    expect((answer.body as MoveAnswer).job).toMatchObject({ stage: 'booked', tag: wrong.tag });
    expect((await sheetOf(owner, wrong.tag)).job.broughtBy).toBeNull();
    const checkIn = { ...atGate, newTag: code };
    expect((await postMove(owner, right.tag, 'checked_in', { checkIn })).status).toBe(200);
    expect((await sheetOf(owner, code)).job.visit.id).toBe(right.visitId);
    expect((await sheetOf(owner, wrong.tag)).job.visit.id).toBe(wrong.visitId);
  });
});

test('an undo that waited until the text had gone comes too late', async () => {
  const { tag, visitId } = await bookJob(app, shop);
  const moved = await bringTo(owner, tag, 'checked_in');
  // As the worker leaves it in the moment after its claim.
  await withShop(shop.id, () => Message.update({ status: 'sending' }, { where: { visitId } }));
  const answer = await undo(tag, moved);
  expect([answer.status, errorOf(answer).code]).toEqual([409, 'too_late']);
  expect((await sheetOf(owner, tag)).job.stage).toBe('checked_in');
});

describe('a machine that is booked anew meanwhile', () => {
  let next = 0;
  const bookMachine = () => bookJob(app, shop, { machines: [fleetMachine()] });
  const fleetMachine = () => ({
    from: 'fleet',
    machineId: shop.machines[next]?.id,
    complaintKindId: shop.complaintKinds[0]?.id,
    words: '',
  });
  beforeEach(() => void (next += 1));

  test('an undone cancel would open a second job for it: refused in words', async () => {
    const { tag } = await bookMachine();
    const cancelled = (await postMove(owner, tag, 'cancelled')).body as MoveAnswer;
    await bookMachine();
    const answer = await undo(tag, cancelled);
    expect([answer.status, errorOf(answer).code]).toEqual([409, 'machine_has_open_job']);
  });

  test('so would letting the old booking in late', async () => {
    const { tag } = await bookMachine();
    await postMove(owner, tag, 'no_show');
    await bookMachine();
    const answer = await postMove(owner, tag, 'checked_in', { checkIn: atGate });
    expect([answer.status, errorOf(answer).code]).toEqual([409, 'machine_has_open_job']);
    expect((await sheetOf(owner, tag)).job.stage).toBe('no_show');
  });
});
