/**
 * The last place of a half-day, asked for by two hundred at once through two server processes: one gets it, everybody
 * else is told at once what is still free, and the count is that of the jobs.
 */
import { randomUUID } from 'node:crypto';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Sequelize } from 'sequelize';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { asRole, openDb, withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { CODE_LIFE_MS, codeHmac } from '#server/lib/loginCodes';
import { openNewShop } from '#server/lib/newShop';
import { hashPassword } from '#server/lib/passwords';
import { ComplaintKind, HalfDay, LoginCode, Person } from '#server/models/index';
import type { ErrorAnswer } from '#shared/errors';
import type { BookAnswer } from '#shared/schemas/booking';
import type { TimesFullDetails, TimesView } from '#shared/schemas/shop';
import { startStack, type Stack } from '../../scripts/lib/harness.mjs';
import { createTestDatabase, type TestDatabase } from '../support/database';

const CLIENTS = 200;
const SLUG = 'last-place';
const PASSWORD = 'seven paper kites over town';
const CODE = '048210';

let database: TestDatabase;
let stack: Stack;
let logDir: string;
let owner: Sequelize;
let shopId: string;
let complaintKindId: string;
let webs: string[];

beforeAll(async () => {
  database = await createTestDatabase();
  logDir = await mkdtemp(join(tmpdir(), 'benchbell-last-place-'));
  const extra = { TRUSTED_HOPS: '1', LOG_LEVEL: 'warn' };
  stack = await startStack({
    databaseUrl: database.url,
    logDir,
    webs: 2,
    workers: 0,
    at: '09:00',
    extra,
  });
  webs = stack.webs.map(({ said }) => said);
  owner = new Sequelize(asRole(database.url, database.ownerRole), { dialect: 'postgres', logging: false });
  openDb({ url: database.url, role: database.appRole, pool: 4 });
  await openTestShop();
}, 120_000);

afterAll(async () => {
  await stack?.stop();
  await owner?.close();
  await database?.drop();
  await rm(logDir, { recursive: true, force: true });
});

async function openTestShop(): Promise<void> {
  const hours = Object.fromEntries(
    [1, 2, 3, 4, 5, 6, 7].map((day) => [day, [{ from: '07:00', to: '17:00' }]]),
  );
  shopId = await openNewShop(owner, {
    slug: SLUG,
    name: 'Last Place Repair',
    textName: 'Last Place',
    zone: 'America/Denver',
    phone: '+13035550100',
    sender: '+13035550101',
    email: 'shop@example.com',
    address: '1 Narrow Street',
    placesPerHalfDay: 1,
    hours: hours as never,
  });
  const passwordHash = await hashPassword(PASSWORD);
  await withShop(shopId, async () => {
    complaintKindId = (await ComplaintKind.findOne({ rejectOnEmpty: true })).id;
    const createdAt = await shopNow();
    const staff = { shopId, name: 'Rosa', email: 'rosa@example.com', passwordHash, createdAt };
    await Person.create({ ...staff, id: newId(), roles: ['counter'] });
  });
}

/** The time by the clock that the servers go by. */
async function shopNow(): Promise<Date> {
  const { offsetMs } = (await (await fetch(stack.addresses.clock)).json()) as { offsetMs: number };
  return new Date(Date.now() + offsetMs);
}

/** The network of each client is its own, as the limits are on. */
const addressOf = (client: number): string => `10.${client >> 8}.${client & 255}.7`;
/** Each from an area code of its own too: 200 to 399 of the north-eastern form, all with valid exchanges. */
const PHONES = Array.from(
  { length: CLIENTS },
  (_, client) =>
    `+1${[303, 720, 970, 719, 212, 312, 415, 602, 505, 801][client % 10]}55501${String(Math.floor(client / 10)).padStart(2, '0')}`,
);

interface Told {
  status: number;
  body: unknown;
  ms: number;
}

async function send(client: number, path: string, body: unknown, headers: Record<string, string> = {}) {
  const since = performance.now();
  const answer = await fetch(`${webs[client % webs.length]}${path}`, {
    method: 'POST',
    headers: {
      'Content-Type': 'application/json',
      'Sec-Fetch-Site': 'same-origin',
      'X-Forwarded-For': addressOf(client),
      ...headers,
    },
    body: JSON.stringify(body),
  });
  const told: Told = { status: answer.status, body: await answer.json(), ms: performance.now() - since };
  return { ...told, cookie: answer.headers.get('set-cookie')?.split(';')[0] ?? '' };
}

/** Everybody's phone as proved by a code: the rows that asking and texting would have left. */
async function proveAll(): Promise<string[]> {
  const createdAt = await shopNow();
  const rows = PHONES.map((phone) => ({ phone, id: randomUUID() }));
  await withShop(shopId, () =>
    LoginCode.bulkCreate(
      rows.map(({ phone, id }) => ({
        shopId,
        id,
        phone,
        purpose: 'book' as const,
        codeHmac: codeHmac(stack.env.CODE_KEY ?? '', id, CODE),
        language: 'en' as const,
        consent: true,
        createdAt,
        expiresAt: new Date(createdAt.getTime() + CODE_LIFE_MS),
      })),
    ),
  );
  return rows.map(({ id }) => id);
}

function bookingOf(client: number, requestId: string, arrivesAt: string) {
  return {
    arrivesAt,
    machines: [{ from: 'new', kind: 'generator', maker: 'Pellmar', complaintKindId, words: '' }],
    note: '',
    language: 'en',
    textConsent: true,
    guest: {
      name: `Guest ${client}`,
      accountName: `Roofing ${client}`,
      email: '',
      phone: PHONES[client],
      requestId,
      code: CODE,
    },
  };
}

const book = (client: number, requestId: string, arrivesAt: string) =>
  send(client, `/api/shops/${SLUG}/bookings`, bookingOf(client, requestId, arrivesAt), {
    'Idempotency-Key': randomUUID(),
  });

async function freeTimes(): Promise<string[]> {
  const answer = await fetch(`${webs[0]}/api/shops/${SLUG}/times`);
  const { days } = (await answer.json()) as TimesView;
  return days.flatMap(({ times }) => times.filter(({ full }) => !full).map(({ at }) => at));
}

interface Counts {
  taken: number;
  room: number;
  jobs: number;
}

/** Per half-day: what the counter says, and how many machines are really booked into it. */
async function counts(): Promise<Counts[]> {
  const [found] = await owner.query(
    `select h.taken, h.places + h.over as room,
       (select count(*)::int from jobs j where j.half_day_id = h.id and j.stage <> 'cancelled') as jobs
     from half_days h`,
  );
  return found as Counts[];
}

/** No half-day holds more than it has room for, and each counts exactly its machines. */
async function expectCounted(): Promise<Counts[]> {
  const all = await counts();
  expect(all.filter(({ taken, jobs }) => taken !== jobs)).toEqual([]);
  expect(all.filter(({ taken, room }) => taken > room)).toEqual([]);
  return all;
}

/** The answer that all but one in twenty were faster than. */
const p95 = (answers: Told[]): number =>
  answers.map(({ ms }) => ms).sort((one, other) => one - other)[Math.floor(answers.length * 0.95)] ?? 0;

describe('two hundred for one place', () => {
  test.each([1, 2, 3])('round %i: one is booked, the others are told what is free', async () => {
    const [wanted = ''] = await freeTimes();
    const requests = await proveAll();
    const answers = await Promise.all(requests.map((requestId, client) => book(client, requestId, wanted)));
    const won = answers.filter(({ status }) => status === 201);
    const lost = answers.filter(({ status }) => status === 409);
    expect([won.length, lost.length]).toEqual([1, CLIENTS - 1]);

    const free = await freeTimes();
    expect(free).not.toContain(wanted);
    for (const { body } of lost) {
      const { error } = body as ErrorAnswer;
      const { next } = error.details as TimesFullDetails;
      expect(error.code).toBe('times_full');
      expect(next).toEqual(free.slice(0, 6));
    }
    const booked = (won[0]?.body ?? {}) as BookAnswer;
    expect(new Date(booked.arrivesAt)).toEqual(new Date(wanted));
    const all = await expectCounted();
    expect(all.every(({ taken, room }) => taken === 1 && room === 1)).toBe(true);
    process.stdout.write(`95 of 100 answers within ${Math.round(p95(answers))} ms\n`);
  });

  test('who was told that it is full is no person of the shop and has no account', async () => {
    const [found] = await owner.query(
      `select (select count(*)::int from accounts) as accounts, (select count(*)::int from visits) as visits,
        (select count(*)::int from people where account_id is not null) as people`,
    );
    const [{ accounts = 0, visits = 0, people = 0 } = {}] = found as Record<string, number>[];
    expect(visits).toBe(3);
    expect(accounts).toBe(people);
    expect(accounts).toBeLessThanOrEqual(visits);
  });
});

/** The counter, who cancels; one session for each of many acts at once. */
async function counterSession(): Promise<string> {
  const credentials = { email: 'rosa@example.com', password: PASSWORD };
  const { cookie, status } = await send(4001, `/api/shops/${SLUG}/sign-in/password`, credentials);
  expect(status).toBe(200);
  return cookie;
}

describe('a place that is given back while others want it', () => {
  test('each cancel lets exactly one more in, however they race', async () => {
    const cookie = await counterSession();
    const [wanted = ''] = await freeTimes();
    const ids = await proveAll();
    const first = await book(0, ids[0] ?? '', wanted);
    let tag = (first.body as BookAnswer).jobs[0]?.tag ?? '';
    for (let round = 0; round < 5; round += 1) {
      const requests = await proveAll();
      const cancel = send(
        4001 + round,
        `/api/shop/jobs/${tag}/moves`,
        { version: 1, to: 'cancelled' },
        { cookie, 'Idempotency-Key': randomUUID() },
      );
      const tries = Array.from({ length: 40 }, (_, at) => 1 + round * 39 + at).map((client) =>
        book(client % CLIENTS, requests[client % CLIENTS] ?? '', wanted),
      );
      const [cancelled, ...answers] = await Promise.all([cancel, ...tries]);
      expect(cancelled.status).toBe(200);
      expect(answers.filter(({ status }) => status !== 201 && status !== 409)).toEqual([]);
      const won = answers.filter(({ status }) => status === 201);
      expect(won.length).toBeLessThanOrEqual(1);
      await expectCounted();
      const last = won[0] ?? (await book(199, requests[199] ?? '', wanted));
      expect(last.status).toBe(201);
      tag = (last.body as BookAnswer).jobs[0]?.tag ?? '';
      await expectCounted();
    }
    expect(await freeTimes()).not.toContain(wanted);
  });

  test('an undone cancel whose place is gone makes the half-day hold one more, on record', async () => {
    const cookie = await counterSession();
    const [wanted = ''] = await freeTimes();
    const requests = await proveAll();
    const booked = (await book(10, requests[10] ?? '', wanted)).body as BookAnswer;
    const tag = booked.jobs[0]?.tag ?? '';
    const act = (name: string, body: unknown) =>
      send(4100, `/api/shop/jobs/${tag}/${name}`, body, { cookie, 'Idempotency-Key': randomUUID() });
    const cancelled = await act('moves', { version: 1, to: 'cancelled' });
    const eventId = (cancelled.body as { job: { undo: { eventId: string } } }).job.undo.eventId;
    const tries = [11, 12, 13, 14].map((client) => book(client, requests[client] ?? '', wanted));
    const [undone, ...answers] = await Promise.all([act('undo', { eventId }), ...tries]);
    expect(undone.status).toBe(200);
    const more = answers.filter(({ status }) => status === 201).length;
    expect(more).toBeLessThanOrEqual(1);
    await expectCounted();
    const raised = await withShop(shopId, () => HalfDay.sum('over'));
    const [events] = await owner.query('select coalesce(sum(places), 0)::int as n from half_day_events');
    expect([raised, (events as { n: number }[])[0]?.n]).toEqual([more, more]);
  });
});
