/** Booking and moving machines for tests: through the command where only the result matters, else over HTTP. */
import { randomUUID } from 'node:crypto';
import type { Response } from 'supertest';
import { bookVisit } from '#server/commands/bookVisit';
import { withShop } from '#server/lib/db';
import { unitShopOf } from '#server/lib/shops';
import type { Person } from '#server/models/index';
import { BookBody, type BookAnswer } from '#shared/schemas/booking';
import type { ErrorAnswer } from '#shared/errors';
import type { JobSheet, MoveAnswer } from '#shared/schemas/job';
import type { Stage } from '#shared/domain/stages';
import type { TestShop } from './factories';
import { ctxOf, type Client, type TestApp } from './testApp';

/** Monday after THURSDAY_NINE, nine in the morning in Denver. */
export const MONDAY_NINE = '2026-12-07T16:00:00.000Z';

/** An Idempotency-Key that nobody used before. */
export const newKey = (): string => `key-${randomUUID()}`;

type Loose = Record<string, unknown>;

/** A machine that the shop has not seen, as the form sends it. */
export function newMachine(shop: TestShop, changes: Loose = {}): Loose {
  const complaintKindId = shop.complaintKinds[0]?.id;
  return { from: 'new', kind: 'generator', maker: 'Pellmar', complaintKindId, words: 'stalls', ...changes };
}

/** A booking as the form of somebody signed in sends it. */
export function bookBody(shop: TestShop, changes: Loose = {}): Loose {
  return {
    arrivesAt: MONDAY_NINE,
    machines: [newMachine(shop)],
    note: '',
    language: 'en',
    textConsent: true,
    ...changes,
  };
}

/** Books without HTTP. */
export async function bookJobs(
  app: TestApp,
  shop: TestShop,
  changes: Loose = {},
  booker: Person = shop.manager,
): Promise<BookAnswer> {
  const body = BookBody.parse(bookBody(shop, changes));
  const open = await withShop(shop.id, () => unitShopOf(shop.id));
  return bookVisit(ctxOf(app, shop.id, booker), { shop: open, body, key: newKey(), proved: null });
}

/** Books one machine without HTTP. */
export async function bookJob(app: TestApp, shop: TestShop, changes: Loose = {}) {
  const booked = await bookJobs(app, shop, changes);
  return { ...booked, tag: booked.jobs[0]?.tag ?? '', token: booked.stubPath.replace('/t/', '') };
}

/** Sends a booking. */
export function postBooking(client: Client, shop: TestShop, body: Loose, key = newKey()) {
  return client.post(`/api/shops/${shop.slug}/bookings`).set('Idempotency-Key', key).send(body);
}

/** Sends one act on a job. */
export function postAct(client: Client, tag: string, act: string, body: Loose, key = newKey()) {
  return client.post(`/api/shop/jobs/${tag}/${act}`).set('Idempotency-Key', key).send(body);
}

/** The job's sheet, as that client reads it. */
export async function sheetOf(client: Client, tag: string): Promise<JobSheet> {
  return (await client.get(`/api/shop/jobs/${tag}`).expect(200)).body as JobSheet;
}

/** Moves a job on from the version that it has now. */
export async function postMove(client: Client, tag: string, to: Stage, more: Loose = {}): Promise<Response> {
  const { job } = await sheetOf(client, tag);
  return postAct(client, tag, 'moves', { version: job.version, to, ...more });
}

/** A signed line that says how the guard was met. */
export const met = (guard: string, more: Loose = {}): Loose => ({
  guard,
  mode: 'met',
  how: 'seen to',
  ...more,
});
/** A signed line that says what was left out and why. */
export const without = (guard: string, more: Loose = {}): Loose => ({
  guard,
  mode: 'without',
  leftOut: 'all of it',
  why: 'the customer waits',
  ...more,
});

/** What the gate writes down. */
export const atGate = { broughtByName: 'Ray', tankBled: true, fuelOff: true, leftWithIt: '' };

/** The way of an ordinary repair, each step with what it asks for. */
const WAY: [Stage, Loose][] = [
  ['checked_in', { checkIn: atGate }],
  ['diagnosis', { lines: [met('walk_round')] }],
  ['repair', { lines: [met('approval')] }],
  ['test_run', {}],
  ['ready', { outcome: 'repaired', lines: [met('passing_run')] }],
  ['collected', { lines: [met('hand_over'), met('who_may_collect'), met('paid', { amountCents: 4200 })] }],
];

/** Moves a booked job along the ordinary way up to a stage. */
export async function bringTo(client: Client, tag: string, to: Stage): Promise<MoveAnswer> {
  for (const [stage, more] of WAY) {
    const answer = await postMove(client, tag, stage, more);
    if (answer.status !== 200) throw new Error(`to ${stage}: ${answer.status} ${answer.text}`);
    if (stage === to) return answer.body as MoveAnswer;
  }
  throw new Error(`${to} is not on the ordinary way`);
}

/** What an answer that is no success says. */
export const errorOf = (answer: Response): ErrorAnswer['error'] => (answer.body as ErrorAnswer).error;

/** Which fields an answer finds fault with. */
export const faultsOf = (answer: Response): string[] =>
  (errorOf(answer).fields ?? []).map(({ path }) => path);

/** How many rows each table has that a request could change, as one comparable value. */
export async function countRows(app: TestApp): Promise<Record<string, number>> {
  const [tables] = await app.owner.query(
    `select tablename as name from pg_tables where schemaname = 'public' order by tablename`,
  );
  const counts: Record<string, number> = {};
  for (const { name } of tables as { name: string }[]) {
    const [found] = await app.owner.query(`select count(*)::int as n from "${name}"`);
    counts[name] = (found as { n: number }[])[0]?.n ?? 0;
  }
  return counts;
}
