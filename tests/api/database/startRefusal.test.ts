import { spawn } from 'node:child_process';
import { QueryTypes, Sequelize } from 'sequelize';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { asRole, refuseStrongRole } from '#server/lib/db';
import { root } from '../../../scripts/lib/harness.mjs';
import { createTestDatabase, type TestDatabase } from '../../support/database';
import { testServer } from '../../support/testServer';

const bypassing = `benchbell_t_bypass_${process.pid}`;
let database: TestDatabase;
/** The same database by the login that administers the test server. */
let strongUrl: string;
let superuser: string;
let admin: Sequelize;

const open = (url: string) => new Sequelize(url, { dialect: 'postgres', logging: false, pool: { max: 1 } });

/** On a server of somebody else's the tests may have no strong role to show; on our own cluster they always do. */
async function isStrong(url: string): Promise<boolean> {
  const connection = open(url);
  try {
    const sql = 'select rolsuper as strong from pg_roles where rolname = current_user';
    const [found] = await connection.query<{ strong: boolean }>(sql, { type: QueryTypes.SELECT });
    return found?.strong ?? false;
  } finally {
    await connection.close();
  }
}
const hasStrong = await isStrong(testServer().adminUrl);

beforeAll(async () => {
  database = await createTestDatabase();
  const address = new URL(testServer().adminUrl);
  superuser = decodeURIComponent(address.username);
  address.pathname = `/${database.name}`;
  strongUrl = address.href;
  admin = open(strongUrl);
  if (hasStrong) await admin.query(`create role "${bypassing}" nologin bypassrls`);
});
afterAll(async () => {
  await admin.query(`drop role if exists "${bypassing}"`);
  await admin.close();
  await database.drop();
});

async function check(url: string): Promise<string> {
  const connection = open(url);
  try {
    await refuseStrongRole(connection);
    return 'starts';
  } catch (error) {
    return error instanceof Error ? error.message : 'unknown';
  } finally {
    await connection.close();
  }
}

describe.runIf(hasStrong)('a connection that row security does not bind', () => {
  it('is refused by name when it is a superuser', async () => {
    expect(await check(strongUrl)).toMatch(`The database role ${superuser} is a superuser`);
  });

  it('is refused by name when its role bypasses row security', async () => {
    expect(await check(asRole(strongUrl, bypassing))).toMatch(`The database role ${bypassing} is`);
  });
});

describe('the roles we use', () => {
  it('are not refused', async () => {
    expect(await check(asRole(database.url, database.appRole))).toBe('starts');
    expect(await check(asRole(database.url, database.ownerRole))).toBe('starts');
  });
});

/** Starts a process of ours as a person would who gave it the wrong role, and waits for its end. */
function start(
  entry: string,
  changes: Record<string, string>,
): Promise<{ code: number | null; said: string }> {
  const secret = 'a1'.repeat(32);
  const env = {
    PATH: process.env.PATH,
    ...{ NODE_ENV: 'test', PORT: '0', PUBLIC_URL: 'http://127.0.0.1:5180', SMTP_URL: 'smtp://127.0.0.1:9' },
    ...{ SESSION_SECRET: secret, LINK_KEY: secret, CODE_KEY: secret, TWILIO_AUTH_TOKEN: 'token-of-the-fake' },
    ...{ TWILIO_ACCOUNT_SID: `AC${'0'.repeat(32)}`, DATABASE_URL: strongUrl },
    ...{ DB_APP_ROLE: database.appRole, DB_OWNER_ROLE: database.ownerRole, ...changes },
  };
  const child = spawn(process.execPath, ['--import', 'tsx', entry], { cwd: root, env, timeout: 25_000 });
  let said = '';
  const listen = (chunk: Buffer) => (said += chunk.toString());
  child.stdout.on('data', listen);
  child.stderr.on('data', listen);
  return new Promise((resolve) => child.on('close', (code) => resolve({ code, said })));
}

describe.runIf(hasStrong).each(['server/web.ts', 'server/worker.ts'])('%s', (entry) => {
  it('ends before it begins its work when its role is a superuser', async () => {
    const { code, said } = await start(entry, { DB_APP_ROLE: superuser });
    expect(said).toContain(`The database role ${superuser} is a superuser or bypasses row security`);
    expect(said).not.toContain('listening');
    expect(code).toBe(1);
  });
});
