/**
 * The connection to PostgreSQL and the unit of work. Inside `withShop` every query runs in one transaction under
 * the shop's row security, found through the asynchronous context; outside one, a shop's table cannot be read.
 */
import { AsyncLocalStorage, AsyncResource } from 'node:async_hooks';
import { QueryTypes, Sequelize } from 'sequelize';
import { registerModels } from '#server/models/index';

type Context = Map<string, unknown>;
const als = new AsyncLocalStorage<Context>();
const SHOP = 'shop';

// Sequelize types its namespace by a library that it does not need: these four functions are all it calls.
const namespace = {
  run: (fn: (context: Context | undefined) => unknown) =>
    als.run(new Map(als.getStore() ?? []), () => fn(als.getStore())),
  get: (key: string) => als.getStore()?.get(key),
  set: (key: string, value: unknown) => als.getStore()?.set(key, value),
  bind: (fn: (...args: unknown[]) => unknown) => AsyncResource.bind(fn),
};
Sequelize.useCLS(namespace);

export interface DbOptions {
  url: string;
  role: string;
  /** Connections at most; see POOLS. */
  pool: number;
  applicationName?: string;
}

/** Connections per process. Together they stay far below the 200 that our own cluster allows. */
export const POOLS = { web: 10, worker: 8, workerOwner: 6, sessions: 4, tool: 4 } as const;

/** The address with the role taken at connection start: the login itself owns nothing and sees nothing. */
export function asRole(url: string, role: string): string {
  const address = new URL(url);
  address.searchParams.set('options', `-c role=${role}`);
  return address.href;
}

/** Opens the pool of a process and binds the models to it. */
export function openDb(options: DbOptions): Sequelize {
  const sequelize = new Sequelize(asRole(options.url, options.role), {
    dialect: 'postgres',
    logging: false,
    pool: { max: options.pool, min: 0, idle: 10_000, acquire: 5_000 },
    dialectOptions: { application_name: options.applicationName ?? 'benchbell', keepAlive: true },
  });
  registerModels(sequelize);
  current = sequelize;
  return sequelize;
}

let current: Sequelize | undefined;

/** The process's connection. */
export function db(): Sequelize {
  if (!current) throw new Error('the database is not open');
  return current;
}

/** Whether this call stands inside a unit of work. Adapters to the outside refuse when it does. */
export function inUnit(): boolean {
  return als.getStore()?.has(SHOP) ?? false;
}

/** The shop of the present unit of work. */
export function unitShop(): string {
  const shopId = als.getStore()?.get(SHOP);
  if (typeof shopId !== 'string') throw new Error('outside a unit of work');
  return shopId;
}

/** Adapters call this first: nothing slow or lost-forever happens while a transaction holds locks. */
export function refuseInUnit(what: string): void {
  if (inUnit()) throw new Error(`${what} inside a unit of work`);
}

/** Deadlocks and serialization failures: the whole unit is run again, as nothing of it has happened. */
const AGAIN = new Set(['40001', '40P01']);
const TRIES = 3;

/**
 * Runs one act of one shop in one transaction. Never nested, nothing in parallel inside, no HTTP, SMTP or hashing
 * inside.
 */
export async function withShop<T>(shopId: string, act: () => Promise<T>): Promise<T> {
  if (inUnit()) throw new Error('a unit of work inside another');
  for (let attempt = 1; ; attempt += 1) {
    try {
      return await runUnit(shopId, act);
    } catch (error) {
      if (attempt >= TRIES || !AGAIN.has(sqlState(error) ?? '')) throw error;
    }
  }
}

function runUnit<T>(shopId: string, act: () => Promise<T>): Promise<T> {
  return als.run(new Map([[SHOP, shopId]]), () =>
    db().transaction(async () => {
      await db().query("select set_config('app.shop', $1, true)", { bind: [shopId] });
      return act();
    }),
  );
}

/** Rows of a raw statement, in the present unit of work if there is one. */
export async function rows<T extends object>(sql: string, bind: unknown[] = []): Promise<T[]> {
  return db().query<T>(sql, { bind, type: QueryTypes.SELECT });
}

/** Runs a raw statement and returns the rows it gives back (`returning`). */
export async function run<T extends object>(sql: string, bind: unknown[] = []): Promise<T[]> {
  const [result] = await db().query(sql, { bind });
  return result as T[];
}

/** The SQLSTATE of a database error, if it is one. */
export function sqlState(error: unknown): string | undefined {
  const original = (error as { original?: { code?: unknown } } | null)?.original;
  return typeof original?.code === 'string' ? original.code : undefined;
}

/** The name of the constraint that a database error speaks of. */
export function constraintOf(error: unknown): string | undefined {
  const original = (error as { original?: { constraint?: unknown } } | null)?.original;
  return typeof original?.constraint === 'string' ? original.constraint : undefined;
}

/**
 * Refuses to start on a connection that row security does not bind.
 * @throws Error naming the role
 */
export async function refuseStrongRole(sequelize: Sequelize): Promise<void> {
  const [role] = await sequelize.query<{ name: string; strong: boolean }>(
    'select rolname as name, rolsuper or rolbypassrls as strong from pg_roles where rolname = current_user',
    { type: QueryTypes.SELECT },
  );
  if (!role?.strong) return;
  throw new Error(
    `The database role ${role.name} is a superuser or bypasses row security, so shops would not be apart. Use a role that is neither.`,
  );
}
