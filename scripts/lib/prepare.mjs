import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { stateDir } from './checkout.mjs';
import { Failure } from './failure.mjs';
import { ensureInstalled } from './install.mjs';
import { withLock } from './lock.mjs';
import { requireNode } from './node.mjs';

/** What every command needs first: the right Node.js, a folder of our own and the packages. */
export async function prepareCheckout() {
  requireNode();
  try {
    mkdirSync(stateDir, { recursive: true, mode: 0o700 });
  } catch (error) {
    throw new Failure(
      `This account cannot write in ${stateDir} (${error.code}): make the checkout its own, or clone it anew.`,
    );
  }
  await withLock(join(stateDir, 'install.lock'), ensureInstalled);
}
