/** A worker at work: it takes tasks, looks for what is due, shows that it lives and frees what the dead left. */
import { EventEmitter } from 'node:events';
import {
  Logger as QueueLogger,
  makeWorkerUtils,
  run as runQueue,
  type TaskList,
  type WorkerPool,
} from 'graphile-worker';
import { Pool } from 'pg';
import type { Services } from '#server/lib/context';
import { asRole, POOLS } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import type { TaskPayloads } from '#server/lib/queue';
import { watchPool } from '#server/lib/watchPool';
import { cleanUp } from './cleanUp';
import { everySoOften } from './everySoOften';
import { beat, BEAT_MS, forget, freeTasksOfTheDead } from './heartbeat';
import { sendMessage, type Senders } from './sendMessage';
import { sweepDue } from './sweeper';

const SWEEP_MS = 1_000;
const CONCURRENCY = 10;
const CRONTAB = '7 * * * * clean_up ?max=3';

export interface Worker {
  id: string;
  /** Rejects when the queue ends by itself. */
  ended: Promise<void>;
  /** Takes no new tasks, finishes what is under way. */
  stop(): Promise<void>;
}

/** Starts working. The queue belongs to the owner role, so its pool connects as that; the shops' rows are the app's. */
export async function startWorker(services: Services, senders: Senders): Promise<Worker> {
  const { env, log } = services;
  const id = newId();
  const owner = new Pool({
    connectionString: asRole(env.DATABASE_URL, env.DB_OWNER_ROLE),
    max: POOLS.workerOwner,
    application_name: 'benchbell worker',
  });
  watchPool(owner, log);
  await refuseStrongOwner(owner);
  const logger = queueLogger(services);
  const utils = await makeWorkerUtils({ pgPool: owner, logger });
  const { runner, poolId } = await startQueue(services, senders, { id, owner, logger });
  const loops = [
    everySoOften(BEAT_MS, 'the heartbeat', log, () => beat(id, poolId)),
    everySoOften(BEAT_MS, 'freeing tasks', log, () => freeTasksOfTheDead(utils)),
    everySoOften(SWEEP_MS, 'the sweep', log, () => sweepDue(services, owner)),
  ];
  return {
    id,
    ended: runner.promise,
    async stop() {
      await Promise.all(loops.slice(1).map((end) => end()));
      await runner.stop();
      await loops[0]?.();
      await forget([id]);
      await utils.release();
      await owner.end();
    },
  };
}

/** The queue's owner too must be a role that row security binds. */
async function refuseStrongOwner(owner: Pool): Promise<void> {
  const { rows: found } = await owner.query<{ name: string }>(
    'select rolname as name from pg_roles where rolname = current_user and (rolsuper or rolbypassrls)',
  );
  if (found[0]) {
    throw new Error(`The database role ${found[0].name} is a superuser or bypasses row security.`);
  }
}

interface Queue {
  id: string;
  owner: Pool;
  logger: QueueLogger;
}

async function startQueue(services: Services, senders: Senders, { id, owner, logger }: Queue) {
  const events = new EventEmitter();
  const poolId = new Promise<string>((resolve) => {
    events.once('pool:create', ({ workerPool }: { workerPool: WorkerPool }) => resolve(workerPool.id));
  });
  // The first sign of life comes before the first claim: a claim of a worker without one is always one of the dead.
  const isAlive = poolId.then((pool) => beat(id, pool));
  const taskList: TaskList = {
    send_message: async (payload) => {
      await isAlive;
      await sendMessage(services, senders, id, payload as TaskPayloads['send_message']);
    },
    clean_up: () => cleanUp(services),
  };
  const runner = await runQueue({
    ...{ pgPool: owner, taskList, logger, events },
    concurrency: CONCURRENCY,
    crontab: CRONTAB,
    noHandleSignals: true,
  });
  await isAlive;
  return { runner, poolId: await poolId };
}

/** The queue's own lines go into our log. Its notes on every task would drown everything else. */
function queueLogger({ log }: Services): QueueLogger {
  return new QueueLogger(() => (level, message, meta) => {
    const name: string = level;
    if (name === 'error') log.error({ queue: meta?.error }, message);
    else if (name === 'warning') log.warn(message);
    else log.debug(message);
  });
}
