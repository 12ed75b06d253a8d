import type { Pool } from 'pg';
import type { Logger } from 'pino';

/** Logs connections that break while nobody uses them; unheard, such an error ends the process. */
export function watchPool(pool: Pool, log: Logger): void {
  const note = (error: Error): void => log.error({ err: error }, 'a connection broke');
  pool.on('error', note);
  pool.on('connect', (client) => client.on('error', note));
}
