import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openShopDatabase, ownerRows, type ShopDatabase } from '../../support/shopDatabase';

/** The tables that belong to no shop: the doors that open before one is known. Each with its reason. */
const GLOBAL: Record<string, { why: string; app: string }> = {
  shops: { why: 'a shop’s page is found by its slug', app: 'SELECT' },
  link_directory: { why: 'a stub link names no shop', app: 'DELETE, INSERT, SELECT' },
  sender_numbers: { why: 'a webhook knows only the number', app: 'SELECT' },
  session: { why: 'a cookie names no shop', app: 'DELETE, INSERT, SELECT, UPDATE' },
  rate_limits: { why: 'limits hold before anybody is known', app: 'DELETE, INSERT, SELECT, UPDATE' },
  worker_heartbeats: { why: 'a worker works for all shops', app: 'DELETE, INSERT, SELECT, UPDATE' },
  migrations: { why: 'which steps the schema has taken', app: '' },
};

const APPEND_ONLY = [
  'audit_events',
  'consents',
  'half_day_events',
  'job_events',
  'job_notes',
  'signed_lines',
  'visit_events',
];
/** What the app may do where it is neither everything nor reading and adding. */
const OTHER_GRANTS: Record<string, string> = {
  shop_settings: 'INSERT, SELECT, UPDATE',
  text_statuses: 'INSERT, SELECT',
};

let base: ShopDatabase;
let tables: string[];
let ofShops: string[];
const rows = <T extends object>(sql: string, bind?: unknown[]) => ownerRows<T>(base, sql, bind);
const column = async (sql: string) => (await rows<{ name: string }>(sql)).map(({ name }) => name);

beforeAll(async () => {
  base = await openShopDatabase();
  tables = await column(
    `select relname as name from pg_class where relnamespace = 'public'::regnamespace and relkind in ('r', 'p', 'v', 'm', 'f')`,
  );
  ofShops = tables.filter((table) => !(table in GLOBAL));
});
afterAll(() => base.close());

const grantsOfApp = async () => {
  const found = await rows<{ name: string; grants: string }>(
    `select table_name as name, string_agg(privilege_type, ', ' order by privilege_type) as grants
     from information_schema.role_table_grants where grantee = $1 and table_schema = 'public' group by 1`,
    [base.appRole],
  );
  return new Map(found.map(({ name, grants }) => [name, grants]));
};

describe('tables of all shops together', () => {
  it('are the closed list and no more', () => {
    expect(tables.filter((table) => table in GLOBAL).sort()).toEqual(Object.keys(GLOBAL).sort());
    expect(ofShops.length).toBeGreaterThan(25);
  });

  it('give the app what their doors need', async () => {
    const grants = await grantsOfApp();
    for (const [table, { app }] of Object.entries(GLOBAL)) expect(grants.get(table) ?? '', table).toBe(app);
  });
});

describe('every other table', () => {
  it('has the primary key (shop_id, id), both uuid', async () => {
    const keys = await rows<{ name: string; key: string }>(
      `select c.conrelid::regclass::text as name, string_agg(a.attname || ' ' || format_type(a.atttypid, null), ', ' order by k.at) as key
       from pg_constraint c, unnest(c.conkey) with ordinality k(attnum, at)
       join pg_attribute a on a.attnum = k.attnum
       where c.contype = 'p' and a.attrelid = c.conrelid and c.connamespace = 'public'::regnamespace group by 1`,
    );
    const keyOf = new Map(keys.map(({ name, key }) => [name, key]));
    for (const table of ofShops) expect(keyOf.get(table), table).toBe('shop_id uuid, id uuid');
  });

  it('begins each unique index with shop_id', async () => {
    const found = await rows<{ name: string; first: string | null; owner: string }>(
      `select i.indexrelid::regclass::text as name, i.indrelid::regclass::text as owner, a.attname as first
       from pg_index i join pg_class t on t.oid = i.indrelid and t.relnamespace = 'public'::regnamespace
       left join pg_attribute a on a.attrelid = i.indrelid and a.attnum = i.indkey[0]
       where i.indisunique or i.indisexclusion`,
    );
    const wrong = found.filter(({ owner, first }) => ofShops.includes(owner) && first !== 'shop_id');
    expect(found.length).toBeGreaterThan(ofShops.length);
    expect(wrong).toEqual([]);
  });

  it('begins each foreign key with shop_id, on both sides', async () => {
    const found = await rows<{
      name: string;
      owner: string;
      target: string;
      first: string;
      targetFirst: string;
    }>(
      `select c.conname as name, c.conrelid::regclass::text as owner, c.confrelid::regclass::text as target,
              a.attname as first, b.attname as "targetFirst"
       from pg_constraint c
       join pg_attribute a on a.attrelid = c.conrelid and a.attnum = c.conkey[1]
       join pg_attribute b on b.attrelid = c.confrelid and b.attnum = c.confkey[1]
       where c.contype = 'f' and c.connamespace = 'public'::regnamespace`,
    );
    const wrong = found.filter(({ owner, target, first, targetFirst }) => {
      const isToShop = target === 'shops' && targetFirst === 'id';
      return ofShops.includes(owner) && (first !== 'shop_id' || !(isToShop || targetFirst === 'shop_id'));
    });
    expect(found.length).toBeGreaterThan(ofShops.length);
    expect(wrong).toEqual([]);
  });

  it('belongs to a shop that exists', async () => {
    const bound = await column(
      `select conrelid::regclass::text as name from pg_constraint
       where contype = 'f' and confrelid = 'shops'::regclass and cardinality(conkey) = 1`,
    );
    expect(ofShops.filter((table) => !bound.includes(table))).toEqual([]);
  });

  it('has row security, enabled and forced', async () => {
    const open = await column(
      `select relname as name from pg_class where relnamespace = 'public'::regnamespace
       and relkind in ('r', 'p') and not (relrowsecurity and relforcerowsecurity)`,
    );
    expect(open.filter((table) => ofShops.includes(table))).toEqual([]);
  });

  it('has exactly two policies: the app its shop’s rows, the owner all', async () => {
    const policies = await rows<Record<string, unknown> & { tablename: string }>(
      `select tablename, roles::text[] as roles, cmd, permissive, qual, with_check from pg_policies
       where schemaname = 'public' order by tablename, policyname`,
    );
    const shape = { cmd: 'ALL', permissive: 'PERMISSIVE', with_check: null };
    const own = "(shop_id = (current_setting('app.shop'::text))::uuid)";
    for (const tablename of ofShops) {
      expect(policies.filter((policy) => policy.tablename === tablename)).toEqual([
        { ...shape, tablename, roles: [base.appRole], qual: own },
        { ...shape, tablename, roles: [base.ownerRole], qual: 'true' },
      ]);
    }
  });

  it('gives the app reading and adding where it is append-only, and nothing beyond its need elsewhere', async () => {
    const grants = await grantsOfApp();
    for (const table of ofShops) {
      const usual = APPEND_ONLY.includes(table) ? 'INSERT, SELECT' : 'DELETE, INSERT, SELECT, UPDATE';
      expect(grants.get(table), table).toBe(OTHER_GRANTS[table] ?? usual);
    }
  });

  it('is closed to everybody else', async () => {
    const strangers = await rows(
      `select table_name, grantee from information_schema.role_table_grants
       where table_schema = 'public' and grantee not in ($1, $2)`,
      [base.appRole, base.ownerRole],
    );
    expect(strangers).toEqual([]);
  });
});

describe('columns', () => {
  const ofType = (condition: string) =>
    column(
      `select table_name || '.' || column_name as name from information_schema.columns
       where table_schema = 'public' and ${condition}`,
    );

  it('keep instants with their zone', async () => {
    expect(await ofType(`data_type in ('timestamp without time zone', 'time with time zone')`)).toEqual([]);
    const named = await ofType(
      `column_name ~ '(_at|^at|_since)$' and data_type <> 'timestamp with time zone'`,
    );
    expect(named).toEqual([]);
  });

  it('keep money in whole minor units', async () => {
    expect(await ofType(`column_name like '%cents' and data_type in ('integer', 'bigint')`)).not.toEqual([]);
    expect(await ofType(`column_name like '%cents' and data_type not in ('integer', 'bigint')`)).toEqual([]);
    expect(await ofType(`data_type in ('real', 'double precision', 'money')`)).toEqual([]);
    expect(await ofType(`column_name ~ '(amount|price|sum|total|fee)$'`)).toEqual([]);
  });
});

describe('append-only tables', () => {
  it('are the listed ones, with a trigger for rows and one for the whole table', async () => {
    const triggers = await rows<{ name: string; rows: boolean; whole: boolean }>(
      `select tgrelid::regclass::text as name,
              bool_or(tgtype & 1 = 1 and tgtype & 8 = 8 and tgtype & 16 = 16 and tgenabled in ('O', 'A')) as rows,
              bool_or(tgtype & 32 = 32 and tgenabled in ('O', 'A')) as whole
       from pg_trigger where tgfoid = 'refuse_change'::regproc group by 1 order by 1`,
    );
    expect(triggers).toEqual(APPEND_ONLY.map((name) => ({ name, rows: true, whole: true })));
  });
});
