import pg from 'pg';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { createTestDatabase, type TestDatabase } from '../support/database';

let first: TestDatabase;
let second: TestDatabase;

beforeAll(async () => {
  [first, second] = await Promise.all([createTestDatabase(), createTestDatabase()]);
});

afterAll(async () => {
  await Promise.all([first.drop(), second.drop()]);
});

async function query<Row extends pg.QueryResultRow>(url: string, role: string, sql: string): Promise<Row[]> {
  const client = new pg.Client({ connectionString: url, options: `-c role=${role}` });
  await client.connect();
  try {
    return (await client.query<Row>(sql)).rows;
  } finally {
    await client.end();
  }
}

test('a test database is a migrated copy of its own', async () => {
  const tables = "select count(*)::int as n from pg_tables where schemaname = 'public'";
  const [{ n } = { n: 0 }] = await query<{ n: number }>(first.url, first.ownerRole, tables);
  expect(n).toBeGreaterThan(5);

  await query(first.url, first.ownerRole, 'create table only_here (id int)');
  const found = await query(
    second.url,
    second.ownerRole,
    "select 1 from pg_tables where tablename = 'only_here'",
  );
  expect(found).toEqual([]);
});

test('neither the login nor the roles it takes can get round row security or make roles and databases', async () => {
  const sql = `select rolname from pg_roles
    where (rolsuper or rolbypassrls or rolcreaterole or rolcreatedb)
      and (rolname = session_user or rolname = current_user or pg_has_role(session_user, oid, 'MEMBER'))`;
  expect(await query(first.url, first.appRole, sql)).toEqual([]);
});

test('the app role may not make tables', async () => {
  const attempt = query(first.url, first.appRole, 'create table app_made_this (id int)');
  await expect(attempt).rejects.toMatchObject({ code: '42501' });
});

test('a dropped test database is gone although somebody is still connected', async () => {
  const third = await createTestDatabase();
  const client = new pg.Client({ connectionString: third.url, options: `-c role=${third.appRole}` });
  client.on('error', () => undefined);
  await client.connect();
  await third.drop();
  const attempt = query(third.url, third.appRole, 'select 1');
  await expect(attempt).rejects.toMatchObject({ code: '3D000' });
});
