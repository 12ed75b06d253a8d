import { randomBytes } from 'node:crypto';
import { appRole, checkoutHash, ownerRole } from './checkout.mjs';
import {
  createDatabase,
  dropDatabase,
  ownServer,
  prepareForeignDatabase,
  withClient,
  withDatabase,
} from './databases.mjs';
import { Failure } from './failure.mjs';
import { identify, isAlive } from './processes.mjs';

const family = `benchbell_${checkoutHash}_t_`;

/** The name of a test database says which process it belongs to, so that a later run can tell a left one. */
export function testDatabaseName({ pid, startTime }, suffix) {
  return `${family}${pid}_${startTime}_${suffix}`;
}

/** The process a test database belongs to, or undefined for any other database. */
export function ownerOfTestDatabase(name) {
  if (!name.startsWith(family)) return undefined;
  const [pid, startTime] = name.slice(family.length).split('_');
  return { pid: Number(pid), startTime };
}

async function foreignServer(url) {
  await prepareForeignDatabase(url);
  const { rows } = await withClient(url, (client) =>
    client.query(
      'select current_user as login, rolcreatedb or rolsuper as able from pg_roles where rolname = current_user',
    ),
  );
  if (!rows[0].able) {
    throw new Failure(
      'The tests make databases of their own, which the login of DATABASE_URL may not: leave DATABASE_URL unset, or grant it CREATEDB.',
    );
  }
  return { adminUrl: url, login: rows[0].login, urlFor: (name) => withDatabase(url, name) };
}

async function dropLeftovers(server) {
  const { rows } = await withClient(server.adminUrl, (client) =>
    client.query('select datname from pg_database'),
  );
  for (const { datname } of rows) {
    const owner = ownerOfTestDatabase(datname);
    if (owner && !isAlive(owner)) await dropDatabase(server, datname);
  }
}

/**
 * Where a run of tests makes its databases: our cluster or the server of DATABASE_URL. What killed runs left is
 * dropped. The answer can be passed to other processes as JSON.
 */
export async function openTestServer(env = process.env) {
  const server = env.DATABASE_URL ? await foreignServer(env.DATABASE_URL) : await ownServer();
  await dropLeftovers(server);
  return {
    adminUrl: server.adminUrl,
    login: server.login,
    loginUrl: server.urlFor('postgres'),
    run: identify(),
  };
}

/** A new database for one test file or run, empty or copied from the run's template. */
export async function newTestDatabase(server, { template } = {}) {
  const name = testDatabaseName(server.run, randomBytes(4).toString('hex'));
  await createDatabase(server, name, { template });
  const url = withDatabase(server.loginUrl, name);
  return { name, url, appRole, ownerRole, drop: () => dropDatabase(server, name) };
}

/** Marks a database as one to copy: a login that is no superuser may copy only such. */
export function markAsTemplate(server, name) {
  return withClient(server.adminUrl, async (client) => {
    await client.query(`set role "${ownerRole}"`);
    await client.query(`alter database "${name}" is_template true`);
  });
}
