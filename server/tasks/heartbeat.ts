/** Signs of life of workers, and what becomes of the tasks of one that has died: they are free again within 30 s. */
import type { WorkerUtils } from 'graphile-worker';
import { rows, run } from '#server/lib/db';
import { IS_DEAD } from '#server/messages/liveWorkers';

export const BEAT_MS = 5_000;

/** Says that this worker lives. The queue locks tasks by the id of its pool. */
export async function beat(workerId: string, poolId: string): Promise<void> {
  await run(
    `insert into worker_heartbeats (worker_id, pool_id, started_at, beat_at)
     values ($1, $2, clock_timestamp(), clock_timestamp())
     on conflict (worker_id) do update set beat_at = excluded.beat_at, pool_id = excluded.pool_id
     returning worker_id`,
    [workerId, poolId],
  );
}

/** Frees the tasks of dead workers; left alone, the queue keeps them locked for hours. @returns how many were dead */
export async function freeTasksOfTheDead(utils: Pick<WorkerUtils, 'forceUnlockWorkers'>): Promise<number> {
  const dead = await rows<{ workerId: string; poolId: string }>(
    `select worker_id as "workerId", pool_id as "poolId" from worker_heartbeats where ${IS_DEAD}`,
  );
  if (dead.length === 0) return 0;
  await utils.forceUnlockWorkers(dead.map(({ poolId }) => poolId));
  await forget(dead.map(({ workerId }) => workerId));
  return dead.length;
}

/** A worker that ended in order is missed by nobody. */
export async function forget(workerIds: string[]): Promise<void> {
  await run('delete from worker_heartbeats where worker_id = any($1::text[]) returning worker_id', [
    workerIds,
  ]);
}
