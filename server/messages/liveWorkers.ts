/**
 * Which workers live. Measured by the database's own clock on all sides: the injected clock can be set, and a jump
 * of it must not declare anybody dead.
 */
import { rows } from '#server/lib/db';

/** At least twice the provider's timeout, so that a dead worker's request has ended when others take over. */
const DEAD_AFTER_SECONDS = 20;

/** Condition on a row of worker_heartbeats. */
export const IS_DEAD = `beat_at < clock_timestamp() - interval '${DEAD_AFTER_SECONDS} seconds'`;

/** Whether the worker that claimed something still shows signs of life. */
export async function isWorkerAlive(workerId: string | null): Promise<boolean> {
  const found = await rows(`select 1 from worker_heartbeats where worker_id = $1 and not (${IS_DEAD})`, [
    workerId,
  ]);
  return found.length > 0;
}
