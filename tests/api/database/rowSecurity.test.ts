import pg from 'pg';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { asRole, rows, run, sqlState, withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { enqueueMessages } from '#server/lib/queue';
import { Account, Job, Person } from '#server/models/index';
import {
  openShopDatabase,
  ownerRows,
  NOW,
  plainShop,
  type PlainShop,
  type ShopDatabase,
} from '../../support/shopDatabase';

let base: ShopDatabase;
let own: PlainShop;
let other: PlainShop;

beforeAll(async () => {
  base = await openShopDatabase({ pool: 1 });
  own = await plainShop(base, 'flint-street', 2);
  other = await plainShop(base, 'ember-yard', 2);
});
afterAll(() => base.close());

const inOwn = <T>(act: () => Promise<T>) => withShop(own.id, act);
const failure = async (act: () => Promise<unknown>) => {
  const value = await act().catch((error: unknown) => sqlState(error) ?? error);
  return value;
};
const filled = ['accounts', 'people', 'machines', 'visits', 'jobs', 'complaint_kinds'];

describe('outside a unit of work', () => {
  it.each(filled)('%s cannot be read on a fresh connection', async (table) => {
    const fresh = new pg.Client({ connectionString: asRole(base.url, base.appRole) });
    await fresh.connect();
    try {
      for (const what of ['*', 'count(*)']) {
        await expect(fresh.query(`select ${what} from ${table}`)).rejects.toMatchObject({ code: '42704' });
      }
    } finally {
      await fresh.end();
    }
  });

  it.each(filled)('%s cannot be read on a connection that served a unit', async (table) => {
    await inOwn(() => rows(`select 1 from ${table}`));
    expect(await failure(() => rows(`select * from ${table}`))).toBe('22P02');
  });

  it('nothing can be written either', async () => {
    await inOwn(() => rows('select 1'));
    expect(await failure(() => run("update accounts set name = 'x'"))).toBe('22P02');
    expect(await failure(() => run('delete from jobs'))).toBe('22P02');
    const account = { shopId: own.id, id: newId(), name: 'x', createdAt: NOW };
    expect(await failure(() => Account.create(account))).toBe('22P02');
  });

  it('a shop of no such form or of nobody gives no rows', async () => {
    expect(await failure(() => withShop('all', () => rows('select 1 from accounts')))).toBe('22P02');
    expect(await withShop(newId(), () => Account.findAll())).toEqual([]);
  });
});

describe('inside a unit of one shop', () => {
  it('no row of another is read, counted or joined', async () => {
    await inOwn(async () => {
      expect((await Account.findAll()).map(({ id }) => id)).toEqual([own.accountId]);
      expect(await Account.findByPk(other.accountId)).toBeNull();
      expect(await Job.count()).toBe(2);
      expect(await rows('select 1 from jobs where shop_id = $1', [other.id])).toEqual([]);
      expect(
        await rows('select 1 from jobs j full join machines m on true where m.shop_id = $1', [other.id]),
      ).toEqual([]);
    });
  });

  it('no row of another is changed or deleted', async () => {
    await inOwn(async () => {
      expect(await Account.update({ name: 'Renamed' }, { where: { id: other.accountId } })).toEqual([0]);
      expect(await Person.destroy({ where: { id: other.personId } })).toBe(0);
      expect(await run('delete from opt_outs where shop_id = $1 returning id', [other.id])).toEqual([]);
      expect(await Account.update({ name: 'Renamed' }, { where: {} })).toEqual([1]);
    });
    const names = await ownerRows<{ name: string }>(base, 'select name from accounts order by name');
    expect(names.map(({ name }) => name)).toEqual(['High Course Roofing', 'Renamed']);
  });

  it('no row is put into another, nor moved there', async () => {
    const stranger = { shopId: other.id, id: newId(), name: 'x', createdAt: NOW };
    expect(await failure(() => inOwn(() => Account.create(stranger)))).toBe('42501');
    const move = 'update accounts set shop_id = $1 where id = $2';
    expect(await failure(() => inOwn(() => run(move, [other.id, own.accountId])))).toBe('42501');
  });

  it('no row of its own hangs on a row of another', async () => {
    const machine = `insert into machines (shop_id, id, account_id, kind, created_at) values ($1, $2, $3, 'pump', $4)`;
    const bind = [own.id, newId(), other.accountId, NOW];
    expect(await failure(() => inOwn(() => run(machine, bind)))).toBe('23503');
  });

  it('both shops may have the same id in a table', async () => {
    const id = newId();
    for (const shop of [own, other]) {
      await withShop(shop.id, () => Account.create({ shopId: shop.id, id, name: 'Twin', createdAt: NOW }));
    }
    await inOwn(() => Account.destroy({ where: { id } }));
    expect(await withShop(other.id, () => Account.count({ where: { id } }))).toBe(1);
  });
});

describe('the app role', () => {
  it.each([
    "insert into shops (id, slug, name, zone) values (gen_random_uuid(), 'new-shop', 'New', 'UTC')",
    "update shops set name = 'Mine'",
    'delete from shops',
    "update sender_numbers set phone = '+13035550100'",
    'select * from migrations',
    'alter table accounts disable row level security',
    'drop policy app_own_shop on accounts',
    'select * from graphile_worker.jobs',
    "select graphile_worker.add_job('send_message')",
  ])('may not: %s', async (sql) => {
    expect(await failure(() => inOwn(() => run(sql)))).toBe('42501');
  });

  it('reads no table of the queue', async () => {
    const queue = await ownerRows<{ name: string }>(
      base,
      "select relname as name from pg_class where relnamespace = 'graphile_worker'::regnamespace and relkind in ('r', 'v')",
    );
    expect(queue.length).toBeGreaterThan(3);
    for (const { name } of queue) {
      expect(await failure(() => rows(`select 1 from graphile_worker."${name}"`)), name).toBe('42501');
    }
  });
});

describe('putting in a task', () => {
  const enqueue = (task: string, payload: object) =>
    run('select enqueue($1, $2)', [task, JSON.stringify(payload)]);
  const tasks = () =>
    ownerRows<{ task: string; payload: { shopId: string } }>(
      base,
      `select t.identifier as task, j.payload from graphile_worker._private_jobs j
       join graphile_worker._private_tasks t on t.id = j.task_id`,
    );
  beforeEach(() => base.owner.query('delete from graphile_worker._private_jobs'));

  it('works for the shop of the unit, and only if the unit commits', async () => {
    const messageId = newId();
    await inOwn(() => enqueueMessages([messageId]));
    expect(await tasks()).toEqual([{ task: 'send_message', payload: { shopId: own.id, messageId } }]);
    const broken = inOwn(async () => {
      await enqueueMessages([newId()]);
      throw new Error('changed my mind');
    });
    await expect(broken).rejects.toThrow('changed my mind');
    expect(await tasks()).toHaveLength(1);
  });

  it.each([
    ['an unknown task', () => inOwn(() => enqueue('drop_everything', { shopId: own.id })), '22023'],
    ['another shop', () => inOwn(() => enqueue('send_message', { shopId: other.id })), '42501'],
    ['no shop', () => inOwn(() => enqueue('send_message', {})), '42501'],
    ['outside a unit', () => enqueue('send_message', { shopId: own.id }), '42501'],
  ])('is refused for %s', async (_name, act, code) => {
    await inOwn(() => rows('select 1'));
    expect(await failure(act)).toBe(code);
    expect(await tasks()).toEqual([]);
  });

  it('runs with a fixed search path, as the owner, for the app alone', async () => {
    const [found] = await ownerRows(
      base,
      `select proowner::regrole::text as owner, prosecdef as definer, proconfig as config,
              has_function_privilege('public', oid, 'execute') as public
       from pg_proc where proname = 'enqueue'`,
    );
    expect(found).toEqual({
      owner: base.ownerRole,
      definer: true,
      config: ['search_path=pg_catalog, pg_temp'],
      public: false,
    });
  });
});
