/** Moving machines over HTTP: every guard is asked for, by whom, with what; and what a move leaves behind. */
import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { withShop } from '#server/lib/db';
import { Job, Tag } from '#server/models/index';
import { newId, pick } from '#server/lib/ids';
import { MOVES, type Outcome, type Stage } from '#shared/domain/stages';
import { drawCode } from '#shared/domain/tagCode';
import type { MovedMeanwhileDetails, MoveAnswer } from '#shared/schemas/job';
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
  without,
} from '../support/jobs';
import { signedIn, startTestApp, type Client, type TestApp } from '../support/testApp';

type Loose = Record<string, unknown>;

let app: TestApp;
let shop: TestShop;
let clients: Record<'counter' | 'mechanic' | 'owner', Client>;

beforeAll(async () => {
  app = await startTestApp();
  shop = await makeShop(app, { placesPerHalfDay: 200 });
  clients = {
    counter: await signedIn(app, shop, shop.staff.counter),
    mechanic: await signedIn(app, shop, shop.staff.mechanic),
    owner: await signedIn(app, shop, shop.staff.owner),
  };
});
afterAll(() => app.stop());

/** A job that stands at a stage, as if it had come there. */
async function jobAt(stage: Stage, outcome: Outcome | null = null): Promise<string> {
  const { tag } = await bookJob(app, shop);
  await withShop(shop.id, async () => {
    const found = await Tag.findOne({ where: { code: tag }, rejectOnEmpty: true });
    const partsReason = stage === 'awaiting_parts' ? 'part' : null;
    await Job.update({ stage, outcome, partsReason }, { where: { id: found.jobId ?? '' } });
  });
  return tag;
}

/** Every move of the product's table that asks for a line, with what it asks for. */
const GUARDED: [from: Stage, to: Stage, more: Loose, guards: string[]][] = [
  ['checked_in', 'diagnosis', {}, ['walk_round']],
  ['diagnosis', 'repair', {}, ['approval']],
  ['awaiting_approval', 'repair', {}, ['approval']],
  ['awaiting_approval', 'awaiting_parts', { partsReason: 'part' }, ['approval']],
  ['awaiting_parts', 'repair', {}, ['parts_in_hand']],
  ['repair', 'awaiting_approval', {}, ['new_finding']],
  ['test_run', 'ready', { outcome: 'repaired' }, ['passing_run']],
  ['test_run', 'ready', { outcome: 'partly_repaired' }, ['what_is_left']],
  ['checked_in', 'ready', { outcome: 'given_back' }, ['asked_to_stop']],
  ['repair', 'ready', { outcome: 'cannot_be_repaired' }, ['asked_to_stop']],
  ['awaiting_approval', 'ready', { outcome: 'no_answer' }, ['answer_attempts']],
  ['ready', 'collected', {}, ['hand_over', 'who_may_collect', 'paid']],
  ['ready', 'disposed', {}, ['disposal_letters']],
];
const SUMS: Record<string, Loose> = { paid: { amountCents: 5000 }, answer_attempts: { amountCents: 0 } };
const outcomeAt = (stage: Stage): Outcome | null => (stage === 'ready' ? 'repaired' : null);

describe.each(GUARDED)('%s to %s', (from, to, more, guards) => {
  test(`asks ${guards.join(', ')}`, async () => {
    const tag = await jobAt(from, outcomeAt(from));
    const bare = await postMove(clients.owner, tag, to, more);
    expect([bare.status, errorOf(bare).code]).toEqual([400, 'invalid']);
    expect(new Set(faultsOf(bare))).toEqual(new Set(['lines']));
    const { problems } = errorOf(bare).details as { problems: { guard: string }[] };
    expect(problems.map(({ guard }) => guard)).toEqual(guards);

    const lines = guards.map((guard) => met(guard, SUMS[guard]));
    const blank = lines.map((line, at) => (at === 0 ? { ...line, how: '  \n ' } : line));
    const refused = await postMove(clients.owner, tag, to, { ...more, lines: blank });
    expect([refused.status, faultsOf(refused)]).toEqual([400, ['lines.0.how']]);
    expect((await sheetOf(clients.owner, tag)).job).toMatchObject({ stage: from, version: 1 });

    const done = await postMove(clients.owner, tag, to, { ...more, lines });
    expect(done.status).toBe(200);
    expect((done.body as MoveAnswer).job).toMatchObject({ stage: to, version: 2 });
    const sheet = await sheetOf(clients.owner, tag);
    expect(sheet.lines.map(({ guard, by, how, voided }) => [guard, by, how, voided])).toEqual(
      guards.map((guard) => [guard, shop.staff.owner.name, 'seen to', false]),
    );
  });
});

test('every move of the table that has a guard is among those tried', () => {
  const tried = new Set(GUARDED.map(([from, to]) => `${from} ${to}`));
  const guarded = MOVES.filter(({ guards }) => guards.length > 0).map(({ from, to }) => `${from} ${to}`);
  expect(guarded.filter((move) => !tried.has(move))).toEqual([]);
});

describe('who goes on without', () => {
  const to: [
    who: 'counter' | 'mechanic' | 'owner',
    guard: string,
    from: Stage,
    to: Stage,
    more: Loose,
    status: number,
  ][] = [
    ['counter', 'walk_round', 'checked_in', 'diagnosis', {}, 200],
    ['mechanic', 'walk_round', 'checked_in', 'diagnosis', {}, 200],
    ['owner', 'walk_round', 'checked_in', 'diagnosis', {}, 403],
    ['counter', 'approval', 'diagnosis', 'repair', {}, 403],
    ['owner', 'approval', 'diagnosis', 'repair', {}, 403],
    ['mechanic', 'parts_in_hand', 'awaiting_parts', 'repair', {}, 200],
    ['counter', 'parts_in_hand', 'awaiting_parts', 'repair', {}, 403],
    ['mechanic', 'passing_run', 'test_run', 'ready', { outcome: 'repaired' }, 200],
    ['owner', 'passing_run', 'test_run', 'ready', { outcome: 'repaired' }, 200],
    ['counter', 'passing_run', 'test_run', 'ready', { outcome: 'repaired' }, 403],
  ];
  test.each(to)('%s without %s: %s to %s', async (who, guard, from, stage, more, status) => {
    const tag = await jobAt(from);
    const answer = await postMove(clients[who], tag, stage, { ...more, lines: [without(guard)] });
    expect(answer.status).toBe(status);
    const { lines, job } = await sheetOf(clients.owner, tag);
    expect(job.stage).toBe(status === 200 ? stage : from);
    expect(lines.map(({ mode, leftOut, why }) => [mode, leftOut, why])).toEqual(
      status === 200 ? [['without', 'all of it', 'the customer waits']] : [],
    );
  });

  test('what was left out and why are both said', async () => {
    const tag = await jobAt('checked_in');
    const line = without('walk_round', { leftOut: ' ', why: '' });
    const answer = await postMove(clients.counter, tag, 'diagnosis', { lines: [line] });
    expect([answer.status, faultsOf(answer)]).toEqual([400, ['lines.0.leftOut', 'lines.0.why']]);
  });

  test('a mechanic records no approval and hands nothing over', async () => {
    const tag = await jobAt('diagnosis');
    expect((await postMove(clients.mechanic, tag, 'repair', { lines: [met('approval')] })).status).toBe(403);
    const ready = await jobAt('ready', 'repaired');
    const lines = [met('hand_over'), met('who_may_collect'), met('paid', { amountCents: 1 })];
    expect((await postMove(clients.mechanic, ready, 'collected', { lines })).status).toBe(403);
  });

  test('unpaid: the counter up to the limit, above it the owner', async () => {
    const limit = shop.settings.unpaidLimitCents;
    const lines = (amountCents: number) => [
      met('hand_over'),
      met('who_may_collect'),
      without('paid', { amountCents }),
    ];
    const tag = await jobAt('ready', 'repaired');
    const over = await postMove(clients.counter, tag, 'collected', { lines: lines(limit + 1) });
    expect([over.status, errorOf(over).code]).toEqual([403, 'forbidden']);
    expect(errorOf(over).details).toMatchObject({ problems: [{ code: 'over_limit', limitCents: limit }] });
    const unsaid = await postMove(clients.counter, tag, 'collected', {
      lines: [met('hand_over'), met('who_may_collect'), without('paid')],
    });
    expect(faultsOf(unsaid)).toEqual(['lines.2.amountCents']);
    expect((await postMove(clients.counter, tag, 'collected', { lines: lines(limit) })).status).toBe(200);
    const dear = await jobAt('ready', 'repaired');
    const byOwner = await postMove(clients.owner, dear, 'collected', { lines: lines(limit + 1) });
    expect(byOwner.status).toBe(200);
    expect((await sheetOf(clients.owner, dear)).lines.at(-1)?.amountCents).toBe(limit + 1);
  });
});

describe('what the table does not have', () => {
  test.each<[Stage, Stage]>([
    ['booked', 'diagnosis'],
    ['booked', 'collected'],
    ['checked_in', 'cancelled'],
    ['repair', 'booked'],
    ['collected', 'ready'],
    ['cancelled', 'booked'],
    ['disposed', 'ready'],
  ])('%s to %s', async (from, to) => {
    const tag = await jobAt(from, from === 'collected' || from === 'disposed' ? 'repaired' : null);
    const answer = await postMove(clients.owner, tag, to);
    expect([answer.status, errorOf(answer).code]).toEqual([409, 'move_refused']);
    expect((await sheetOf(clients.owner, tag)).job.stage).toBe(from);
  });

  test('a line that nobody asked for', async () => {
    const tag = await jobAt('diagnosis');
    const answer = await postMove(clients.owner, tag, 'test_run', { lines: [met('approval')] });
    expect([answer.status, errorOf(answer).code]).toEqual([409, 'move_refused']);
    expect((await sheetOf(clients.owner, tag)).lines).toEqual([]);
  });

  test('disposal and cancelling by who may not', async () => {
    const lines = [met('disposal_letters')];
    const ready = await jobAt('ready', 'cannot_be_repaired');
    expect((await postMove(clients.counter, ready, 'disposed', { lines })).status).toBe(403);
    const booked = await jobAt('booked');
    expect((await postMove(clients.mechanic, booked, 'cancelled')).status).toBe(403);
  });
});

describe('outcomes', () => {
  test('ready says which', async () => {
    const tag = await jobAt('test_run');
    expect(faultsOf(await postMove(clients.owner, tag, 'ready'))).toEqual(['outcome']);
  });

  test.each<[Stage, Outcome]>([
    ['diagnosis', 'repaired'],
    ['repair', 'partly_repaired'],
    ['repair', 'no_fault_found'],
    ['checked_in', 'not_worth_repairing'],
    ['test_run', 'no_answer'],
  ])('from %s never %s', async (from, outcome) => {
    const answer = await postMove(clients.owner, await jobAt(from), 'ready', { outcome });
    expect([answer.status, errorOf(answer).code]).toEqual([409, 'move_refused']);
  });

  test.each<Stage>(['checked_in', 'diagnosis', 'awaiting_approval', 'awaiting_parts', 'repair', 'test_run'])(
    'work stops from %s, with who asked, and is given back as it is',
    async (from) => {
      const tag = await jobAt(from);
      const lines = [met('asked_to_stop', { how: 'Dana by telephone' })];
      const answer = await postMove(clients.mechanic, tag, 'ready', { outcome: 'declined', lines });
      expect((answer.body as MoveAnswer).job).toMatchObject({ stage: 'ready', outcome: 'declined' });
    },
  );

  test('going back before ready clears it; being collected keeps it', async () => {
    const back = await jobAt('ready', 'repaired');
    const answer = await postMove(clients.mechanic, back, 'repair');
    expect((answer.body as MoveAnswer).job).toMatchObject({ stage: 'repair', outcome: null });
    const { tag } = await bookJob(app, shop);
    expect((await bringTo(clients.owner, tag, 'collected')).job.outcome).toBe('repaired');
  });

  test('waiting for parts says for what, and leaving forgets it', async () => {
    const tag = await jobAt('diagnosis');
    expect(faultsOf(await postMove(clients.mechanic, tag, 'awaiting_parts'))).toEqual(['partsReason']);
    const waiting = await postMove(clients.mechanic, tag, 'awaiting_parts', { partsReason: 'makers_answer' });
    expect((waiting.body as MoveAnswer).job.partsReason).toBe('makers_answer');
    const back = await postMove(clients.mechanic, tag, 'diagnosis');
    expect((back.body as MoveAnswer).job.partsReason).toBeNull();
  });
});

describe('two at once', () => {
  test('one succeeds, the other is told where it is, by whom and since when', async () => {
    const tag = await jobAt('diagnosis');
    const move = (client: Client, to: Stage) => postAct(client, tag, 'moves', { version: 1, to });
    const answers = await Promise.all([
      move(clients.mechanic, 'test_run'),
      move(clients.counter, 'awaiting_approval'),
    ]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 409]);
    const won = answers.find(({ status }) => status === 200)?.body as MoveAnswer;
    const lost = answers.find(({ status }) => status === 409);
    const error = lost && errorOf(lost);
    const by = (won.job.stage === 'test_run' ? shop.staff.mechanic : shop.staff.counter).name;
    expect(error?.code).toBe('moved_meanwhile');
    const details: MovedMeanwhileDetails = {
      stage: won.job.stage,
      version: 2,
      by,
      at: app.clock.now().toISOString(),
    };
    expect(error?.details).toEqual(details);
  });

  test('the same key twice moves once', async () => {
    const tag = await jobAt('diagnosis');
    const key = newKey();
    const send = () => postAct(clients.mechanic, tag, 'moves', { version: 1, to: 'test_run' }, key);
    const [one, two] = await Promise.all([send(), send()]);
    expect([one.status, two.status]).toEqual([200, 200]);
    expect(two.body).toEqual(one.body);
    expect((await sheetOf(clients.mechanic, tag)).history).toHaveLength(2);
    const other = await postAct(clients.mechanic, tag, 'moves', { version: 2, to: 'repair' }, key);
    expect([other.status, errorOf(other).code]).toEqual([422, 'key_reused']);
  });
});

describe('check-in', () => {
  const checkIn = (tag: string, changes: object, more: Loose = {}) =>
    postMove(clients.counter, tag, 'checked_in', { checkIn: { ...atGate, ...changes }, ...more });

  test('asks who brought it, and why it was not made safe', async () => {
    const { tag } = await bookJob(app, shop);
    expect(faultsOf(await postMove(clients.counter, tag, 'checked_in'))).toEqual(['checkIn']);
    expect(faultsOf(await checkIn(tag, { broughtByName: ' ' }))).toEqual(['checkIn.broughtByName']);
    expect(faultsOf(await checkIn(tag, { tankBled: false }))).toEqual(['note']);
    const answer = await checkIn(tag, { tankBled: false }, { note: 'valve is stuck' });
    expect(answer.status).toBe(200);
    expect((await sheetOf(clients.counter, tag)).notes[0]?.body).toBe('valve is stuck');
  });

  test('keeps who brought it and what was left with it', async () => {
    const { tag } = await bookJob(app, shop);
    const brought = { broughtByPersonId: shop.crewLead.id, broughtByName: '', leftWithIt: '50 ft hose' };
    expect((await checkIn(tag, brought)).status).toBe(200);
    const { job } = await sheetOf(clients.counter, tag);
    expect([job.broughtBy, job.leftWithIt]).toEqual([shop.crewLead.name, '50 ft hose']);
  });

  test('a blank tag is hung, and the code that was given at booking still finds the job', async () => {
    const { tag } = await bookJob(app, shop);
    const blank = drawCode(pick);
    await withShop(shop.id, () =>
      Tag.create({ shopId: shop.id, id: newId(), code: blank, fromAt: app.clock.now() }),
    );
    const answer = await checkIn(tag, { newTag: `${blank.slice(0, 3)}-${blank.slice(3).toLowerCase()}` });
    expect((answer.body as MoveAnswer).job.tag).toBe(blank);
    const byOld = await sheetOf(clients.counter, tag);
    const byNew = await sheetOf(clients.counter, blank);
    expect(byOld).toEqual(byNew);
    expect(byNew.job.tag).toBe(blank);
    expect(byNew.history.map(({ kind }) => kind)).toContain('tag_replaced');

    const { tag: second } = await bookJob(app, shop);
    const taken = await checkIn(second, { newTag: blank });
    expect([taken.status, faultsOf(taken)]).toEqual([400, ['checkIn.newTag']]);
    expect((await checkIn(second, { newTag: tag })).status).toBe(400);
  });

  test('the person must be one of the account', async () => {
    const { tag } = await bookJob(app, shop);
    for (const broughtByPersonId of [shop.staff.driver.id, randomUUID()]) {
      const answer = await checkIn(tag, { broughtByPersonId, broughtByName: '' });
      expect([answer.status, faultsOf(answer)]).toEqual([400, ['checkIn.broughtByPersonId']]);
    }
    expect((await sheetOf(clients.counter, tag)).job.stage).toBe('booked');
  });

  test('whoever comes late, after a no-show, is let in by the counter', async () => {
    const { tag } = await bookJob(app, shop);
    expect((await postMove(clients.counter, tag, 'no_show')).status).toBe(200);
    const late = { checkIn: atGate };
    expect((await postMove(clients.mechanic, tag, 'checked_in', late)).status).toBe(403);
    expect((await postMove(clients.counter, tag, 'checked_in', late)).status).toBe(200);
  });
});

test('a move says which notices are held, for whom and until when', async () => {
  const { tag } = await bookJob(app, shop);
  const { held } = await bringTo(clients.owner, tag, 'checked_in');
  const until = new Date(app.clock.now().getTime() + 60_000).toISOString();
  expect(held).toEqual([{ personName: shop.manager.name, channel: 'text', releaseAt: until }]);
  const untold = await postMove(clients.owner, tag, 'diagnosis', { lines: [met('walk_round')] });
  expect((untold.body as MoveAnswer).held).toEqual([]);
});
