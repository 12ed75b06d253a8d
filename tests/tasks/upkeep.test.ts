/** What keeps the queue honest: tasks of the dead, lost hints, shops that do not send, things that have served their time. */
import { makeWorkerUtils, type WorkerUtils } from 'graphile-worker';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { rows, withShop } from '#server/lib/db';
import { ShopSettings } from '#server/models/index';
import { cleanUp } from '#server/tasks/cleanUp';
import { freeTasksOfTheDead } from '#server/tasks/heartbeat';
import { sweepDue } from '#server/tasks/sweeper';
import { makeShop, suspend, type TestShop } from '../support/factories';
import { bookJobs } from '../support/jobs';
import { pass } from '../support/testApp';
import { queuedTasks, startOutbox, type Outbox } from './support/outbox';

let outbox: Outbox;
let shop: TestShop;
let utils: WorkerUtils;
beforeAll(async () => {
  outbox = await startOutbox();
  utils = await makeWorkerUtils({ pgPool: outbox.owner });
});
afterAll(async () => {
  await utils.release();
  await outbox.stop();
});
beforeEach(async () => {
  outbox.app.clock.set(new Date('2026-12-03T16:00:00Z'));
  await outbox.owner.query('delete from graphile_worker._private_jobs');
  // What an earlier test left waiting is not this one's.
  await outbox.owner.query(`update messages set status = 'demo' where status = 'pending'`);
  shop = await makeShop(outbox.app);
});

const sweep = () => sweepDue(outbox.app.services, outbox.owner);

describe('tasks', () => {
  it('are put in with the booking, in the same transaction', async () => {
    await bookJobs(outbox.app, shop, {}, shop.crewLead);
    // Text and e-mail to whoever booked, e-mail to the manager.
    expect(await queuedTasks(outbox.owner)).toBe(3);
    expect(await sweep()).toBe(0);
  });

  it('that got lost are put in again after 20 s, once', async () => {
    await bookJobs(outbox.app, shop, {}, shop.crewLead);
    await outbox.owner.query('delete from graphile_worker._private_jobs');
    pass(outbox.app, 19_000);
    expect(await sweep()).toBe(0);
    pass(outbox.app, 2_000);
    expect([await sweep(), await sweep()]).toEqual([3, 0]);
  });

  it('of a worker that shows no sign of life for 20 s are free again; those of the living are not', async () => {
    await bookJobs(outbox.app, shop, {}, shop.crewLead);
    await outbox.owner.query(
      `update graphile_worker._private_jobs set locked_at = clock_timestamp(), locked_by = case when id % 2 = 0 then 'pool-dead' else 'pool-alive' end`,
    );
    await outbox.owner.query(
      `insert into worker_heartbeats (worker_id, pool_id, started_at, beat_at) values
       ('dead', 'pool-dead', clock_timestamp(), clock_timestamp() - interval '21 seconds'),
       ('alive', 'pool-alive', clock_timestamp(), clock_timestamp() - interval '15 seconds')`,
    );
    expect([await freeTasksOfTheDead(utils), await freeTasksOfTheDead(utils)]).toEqual([1, 0]);
    const { rows: locked } = await outbox.owner.query<{ by: string }>(
      'select distinct locked_by as by from graphile_worker._private_jobs where locked_by is not null',
    );
    expect(locked.map(({ by }) => by)).toEqual(['pool-alive']);
  });
});

describe('a shop', () => {
  it('that does not send, or is suspended, keeps its messages for later', async () => {
    await bookJobs(outbox.app, shop, {}, shop.crewLead);
    await withShop(shop.id, () => ShopSettings.update({ sending: false }, { where: {} }));
    await outbox.work();
    pass(outbox.app, 60_000);
    expect(await sweep()).toBe(0);
    expect(outbox.textsTo(shop.crewLead.phone)).toEqual([]);
    await withShop(shop.id, () => ShopSettings.update({ sending: true }, { where: {} }));
    await suspend(outbox.app, shop.id, outbox.app.clock.now());
    expect(await sweep()).toBe(0);
    await suspend(outbox.app, shop.id, null);
    await outbox.work();
    expect(outbox.textsTo(shop.crewLead.phone)).toHaveLength(1);
  });
});

describe('the hourly clean-up', () => {
  it('throws away keys after 48 hours and nothing younger', async () => {
    await bookJobs(outbox.app, shop, {}, shop.crewLead);
    const keys = () => withShop(shop.id, () => rows('select 1 from idempotency_keys'));
    pass(outbox.app, 48 * 3_600_000);
    await cleanUp(outbox.app.services);
    expect(await keys()).toHaveLength(1);
    pass(outbox.app, 1_000);
    await cleanUp(outbox.app.services);
    expect(await keys()).toHaveLength(0);
  });

  it('throws away sessions and limits whose time is over by the machine’s clock', async () => {
    await outbox.owner.query(
      `insert into session (sid, sess, expire) values
       ('over', '{}', clock_timestamp() - interval '1 second'), ('runs', '{}', clock_timestamp() + interval '1 minute')`,
    );
    await outbox.owner.query(`insert into rate_limits (key, points, expire) values
      ('over', 1, (extract(epoch from clock_timestamp()) * 1000)::bigint - 1000),
      ('runs', 1, (extract(epoch from clock_timestamp()) * 1000)::bigint + 60000), ('forever', 1, null)`);
    await cleanUp(outbox.app.services);
    const left = async (column: string, table: string) =>
      (
        await outbox.owner.query<{ name: string }>(
          `select ${column} as name from ${table} where ${column} in ('over', 'runs', 'forever') order by 1`,
        )
      ).rows.map(({ name }) => name);
    expect([await left('sid', 'session'), await left('key', 'rate_limits')]).toEqual([
      ['runs'],
      ['forever', 'runs'],
    ]);
  });
});
