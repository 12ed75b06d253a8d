import connectPgSimple from 'connect-pg-simple';
import expressSession, { type SessionData } from 'express-session';
import pg from 'pg';
import type { Services } from './context';
import { hashToken } from './ids';
import { asRole, POOLS, run } from './db';
import { watchPool } from './watchPool';

const PgStore = connectPgSimple(expressSession);
type Done = (error?: unknown) => void;

/**
 * Sessions in PostgreSQL. The table knows only hashes, so whoever reads it cannot take a session over. A session is
 * inserted once, at sign-in, and only updated afterwards: a request that was under way when its session was ended
 * elsewhere must not bring it back.
 */
export class SessionStore extends PgStore {
  readonly #pool: pg.Pool;
  readonly #unborn = new Set<string>();

  constructor(pool: pg.Pool, services: Services) {
    super({
      pool,
      tableName: 'session',
      disableTouch: true,
      errorLog: (...facts: unknown[]) => services.log.error({ facts }, 'session store'),
    });
    this.#pool = pool;
  }

  override get(sid: string, done: (error: unknown, session?: SessionData | null) => void): void {
    super.get(hashToken(sid), done);
  }

  override regenerate(...[req, done]: Parameters<InstanceType<typeof PgStore>['regenerate']>): void {
    super.regenerate(req, (error?: unknown) => {
      if (!error) this.#unborn.add(req.sessionID);
      done(error);
    });
  }

  override set(sid: string, session: SessionData, done?: Done): void {
    if (this.#unborn.delete(sid)) return super.set(hashToken(sid), session, done);
    this.#pool
      .query('update session set sess = $2 where sid = $1', [hashToken(sid), JSON.stringify(session)])
      .then(
        () => done?.(),
        (error: unknown) => done?.(error),
      );
  }

  override destroy(sid: string, done?: Done): void {
    this.#unborn.delete(sid);
    super.destroy(hashToken(sid), done);
  }
}

/** The small pool that the sessions have to themselves. */
export function openSessionPool({ env, log }: Services): pg.Pool {
  const pool = new pg.Pool({
    connectionString: asRole(env.DATABASE_URL, env.DB_APP_ROLE),
    max: POOLS.sessions,
    application_name: 'benchbell sessions',
    allowExitOnIdle: true,
  });
  watchPool(pool, log);
  return pool;
}

/** Ends every session of a person, on every device. */
export async function endSessionsOf(person: { shopId: string; personId: string }): Promise<void> {
  await run(
    `delete from session
      where sess #>> '{passport,user,shopId}' = $1 and sess #>> '{passport,user,personId}' = $2`,
    [person.shopId, person.personId],
  );
}
