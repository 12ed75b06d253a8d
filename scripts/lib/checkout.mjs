import { createHash } from 'node:crypto';
import { realpathSync } from 'node:fs';
import { homedir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** Ten hexadecimal digits that name a checkout: two checkouts side by side never share a database. */
export function hashOfPath(path) {
  return createHash('sha256').update(path).digest('hex').slice(0, 10);
}

/** Where a checkout's cluster lives: a place the account that runs PostgreSQL can enter. */
export function clusterHomeFor({ isRoot, hash, stateHome, home }) {
  // postgres cannot enter /root, where a checkout often is; an ordinary account keeps it with its own state.
  if (isRoot) return `/var/lib/postgresql/benchbell-${hash}`;
  return join(stateHome || join(home, '.local', 'state'), `benchbell-${hash}`);
}

/** The real path of this checkout. */
export const root = realpathSync(join(dirname(fileURLToPath(import.meta.url)), '..', '..'));

export const checkoutHash = hashOfPath(root);
export const isRoot = process.getuid?.() === 0;
export const clusterHome = clusterHomeFor({
  isRoot,
  hash: checkoutHash,
  stateHome: process.env.XDG_STATE_HOME,
  home: homedir(),
});

/** What a running checkout remembers: secrets, logs, process ids. Ignored by git. */
export const stateDir = join(root, '.benchbell');
export const logDir = join(stateDir, 'logs');

export const appRole = `benchbell_app_${checkoutHash}`;
export const ownerRole = `benchbell_owner_${checkoutHash}`;
export const loginRole = `benchbell_${checkoutHash}`;
