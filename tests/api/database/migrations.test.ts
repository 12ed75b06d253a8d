import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { asRole } from '#server/lib/db';
import { migrateDown, migrateUp } from '#server/lib/migrator';
import { newTestDatabase, type TestDatabase } from '../../../scripts/lib/harness.mjs';
import { testServer } from '../../support/testServer';

let database: TestDatabase;
let client: pg.Client;

beforeAll(async () => {
  database = await newTestDatabase(testServer());
  client = new pg.Client({ connectionString: asRole(database.url, database.ownerRole) });
  await client.connect();
});
afterAll(async () => {
  await client.end();
  await database.drop();
});

const target = () => ({ ...database, databaseUrl: database.url });
const ours = `in (select oid from pg_namespace where nspname in ('public', 'graphile_worker'))`;

/** Everything of the schema that a difference could hide in, in an order of its own. */
const PARTS = {
  columns: `select c.relnamespace::regnamespace::text, c.relname, a.attname, format_type(a.atttypid, a.atttypmod), a.attnotnull,
                   pg_get_expr(d.adbin, d.adrelid)
            from pg_class c join pg_attribute a on a.attrelid = c.oid and a.attnum > 0 and not a.attisdropped
            left join pg_attrdef d on d.adrelid = c.oid and d.adnum = a.attnum
            where c.relnamespace ${ours} and c.relkind in ('r', 'v', 'S')`,
  constraints: `select conrelid::regclass::text, conname, pg_get_constraintdef(oid) from pg_constraint where connamespace ${ours}`,
  indexes: `select schemaname, indexname, indexdef from pg_indexes where schemaname in ('public', 'graphile_worker')`,
  policies: `select schemaname, tablename, policyname, roles::text, cmd, qual, with_check from pg_policies`,
  security: `select relnamespace::regnamespace::text, relname, relrowsecurity, relforcerowsecurity,
                    array(select unnest(relacl)::text order by 1)::text
             from pg_class where relnamespace ${ours} and relkind in ('r', 'v')`,
  triggers: `select pg_get_triggerdef(oid) from pg_trigger where not tgisinternal`,
  functions: `select oid::regprocedure::text, prosecdef, proconfig::text, proacl::text, md5(prosrc) from pg_proc where pronamespace ${ours}`,
};

async function dump(): Promise<Record<string, string[]>> {
  const parts: Record<string, string[]> = {};
  for (const [part, sql] of Object.entries(PARTS)) {
    const { rows } = await client.query<unknown[]>({ text: sql, rowMode: 'array' });
    parts[part] = rows.map((row) => JSON.stringify(row)).sort();
  }
  return parts;
}

describe('migrations', () => {
  it('make the schema, and the second time nothing', async () => {
    const applied = await migrateUp(target());
    expect(applied.length).toBeGreaterThan(4);
    expect(applied).toEqual([...applied].sort());
    const first = await dump();
    for (const part of Object.keys(PARTS)) expect(first[part]?.length, part).toBeGreaterThan(5);
    expect(await migrateUp(target())).toEqual([]);
    expect(await dump()).toEqual(first);
  });

  it('go back to an empty database, and forth again to the very same schema', async () => {
    const before = await dump();
    const back = await migrateDown(target(), 'all');
    const left = await client.query<{ relname: string }>(
      `select relname from pg_class where relnamespace ${ours} and relkind in ('r', 'v', 'S')`,
    );
    expect(left.rows).toEqual([{ relname: 'migrations' }]);
    expect((await dump()).functions).toEqual([]);
    const forth = await migrateUp(target());
    expect(forth).toEqual([...back].reverse());
    expect(await dump()).toEqual(before);
  });

  it('go back one at a time, and forth again', async () => {
    const before = await dump();
    const [last] = await migrateDown(target());
    expect(last).toBeDefined();
    expect(await dump()).not.toEqual(before);
    expect(await migrateUp(target())).toEqual([last]);
    expect(await dump()).toEqual(before);
  });
});
