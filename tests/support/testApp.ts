/**
 * The whole application on a database of this file's own, in this process: a clock that stands where it is put, a log
 * that can be read, and clients that come each from their own network, as the limits are on.
 */
import { randomBytes, randomInt } from 'node:crypto';
import { Writable } from 'node:stream';
import type { Express } from 'express';
import pino from 'pino';
import { Sequelize } from 'sequelize';
import supertest from 'supertest';
import { createApp } from '#server/app';
import { parseEnv, type Env } from '#server/env';
import { manualClock } from '#server/lib/clock';
import type { Ctx, Services } from '#server/lib/context';
import { asRole, openDb, withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { serializers } from '#server/lib/logger';
import { codeHmac, CODE_LIFE_MS } from '#server/lib/loginCodes';
import { LoginCode, type Person } from '#server/models/index';
import type { Actor } from '#shared/domain/roles';
import { createTestDatabase, type TestDatabase } from './database';

/** A Thursday, nine in the morning at the shop in Denver. */
export const THURSDAY_NINE = new Date('2026-12-03T16:00:00Z');
export const PASSWORD = 'seven paper kites over town';

/** A browser: keeps cookies, sends what a browser sends, comes from an address of its own. */
export type Client = ReturnType<typeof supertest.agent>;

export interface TestApp {
  express: Express;
  services: Services;
  env: Env;
  clock: ReturnType<typeof manualClock>;
  database: TestDatabase;
  /** A connection as the owner role, which sees all shops. */
  owner: Sequelize;
  /** What was logged, one JSON line each. */
  log: string[];
  /** A second process's worth of application on the same database. */
  another(): Promise<Express>;
  stop(): Promise<void>;
}

const secret = (): string => randomBytes(32).toString('hex');

function testEnv(database: TestDatabase, changes: Record<string, string>): Env {
  return parseEnv({
    NODE_ENV: 'test',
    PUBLIC_URL: 'http://127.0.0.1:5180',
    TRUSTED_HOPS: '1',
    DATABASE_URL: database.url,
    DB_APP_ROLE: database.appRole,
    DB_OWNER_ROLE: database.ownerRole,
    SESSION_SECRET: secret(),
    LINK_KEY: secret(),
    CODE_KEY: secret(),
    TWILIO_ACCOUNT_SID: `AC${'0'.repeat(32)}`,
    TWILIO_AUTH_TOKEN: 'token-of-the-fake',
    SMTP_URL: 'smtp://127.0.0.1:9',
    LOG_LEVEL: 'debug',
    ...changes,
  });
}

function readableLog(lines: string[]) {
  const stream = new Writable({
    write(chunk: Buffer, _encoding, done) {
      lines.push(chunk.toString());
      done();
    },
  });
  return pino({ level: 'debug', serializers }, stream);
}

/** Starts the application. Stop it in afterAll. */
export async function startTestApp(
  options: { now?: Date; env?: Record<string, string> } = {},
): Promise<TestApp> {
  const database = await createTestDatabase();
  const env = testEnv(database, options.env ?? {});
  const clock = manualClock(options.now ?? THURSDAY_NINE);
  const log: string[] = [];
  const services: Services = { env, clock, log: readableLog(log) };
  const db = openDb({ url: database.url, role: database.appRole, pool: 10 });
  const owner = new Sequelize(asRole(database.url, database.ownerRole), {
    dialect: 'postgres',
    logging: false,
  });
  return {
    express: await createApp(services),
    services,
    env,
    clock,
    database,
    owner,
    log,
    another: () => createApp({ ...services }),
    async stop() {
      await Promise.all([db.close(), owner.close()]);
      await database.drop();
    },
  };
}

/** An address in a network that no other client of this run is likely to come from. */
export const newAddress = (): string => `10.${randomInt(256)}.${randomInt(256)}.${randomInt(1, 255)}`;

/** A browser that nobody has signed in with. */
export function visitor(app: Pick<TestApp, 'express'>, address = newAddress()): Client {
  const client = supertest.agent(app.express);
  client.set({ 'Sec-Fetch-Site': 'same-origin', 'X-Forwarded-For': address });
  return client;
}

/** A browser in which that person has signed in, as people of his kind do. */
export async function signedIn(app: TestApp, shop: { slug: string }, person: Person): Promise<Client> {
  const client = visitor(app);
  const path = `/api/shops/${shop.slug}/sign-in`;
  const answer =
    person.accountId === null
      ? await client.post(`${path}/password`).send({ email: person.email, password: PASSWORD })
      : await client
          .post(`${path}/code`)
          .send({ ...(await placeCode(app, person, 'sign_in')), personId: person.id });
  if (answer.status !== 200) throw new Error(`sign-in of ${person.name}: ${answer.status} ${answer.text}`);
  return client;
}

/** Puts a code for a phone into the database, as if it had been asked for and sent. */
export async function placeCode(
  app: Pick<TestApp, 'clock' | 'env'>,
  { shopId, phone }: { shopId: string; phone: string | null },
  purpose: LoginCode['purpose'],
): Promise<{ requestId: string; code: string }> {
  const requestId = newId();
  const code = String(randomInt(1_000_000)).padStart(6, '0');
  const createdAt = app.clock.now();
  await withShop(shopId, () =>
    LoginCode.create({
      shopId,
      id: requestId,
      phone: phone ?? '',
      purpose,
      codeHmac: codeHmac(app.env.CODE_KEY, requestId, code),
      language: 'en',
      createdAt,
      expiresAt: new Date(createdAt.getTime() + CODE_LIFE_MS),
    }),
  );
  return { requestId, code };
}

/** The context in which a command runs when that person acts now. */
export function ctxOf(app: TestApp, shopId: string, person?: Person): Ctx {
  return {
    ...app.services,
    shopId,
    actor: person ? actorFor(person) : null,
    ip: '10.0.0.1',
    now: app.clock.now(),
  };
}

function actorFor({ id, shopId, name, roles, accountId, crewId }: Person): Actor {
  return { shopId, personId: id, name, roles, accountId, crewId };
}

/** Moves the clock on. */
export function pass(app: Pick<TestApp, 'clock'>, milliseconds: number): void {
  app.clock.set(new Date(app.clock.now().getTime() + milliseconds));
}
