import { mkdirSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { clusterHome } from './checkout.mjs';
import { identify, isAlive } from './processes.mjs';

// Several commands of one checkout share the cluster (a start, a test run beside it); the last one out stops it.
const folder = join(clusterHome, 'uses');
const nameOf = ({ pid, startTime }) => `${pid}-${startTime}`;

/** Notes that a process uses the cluster; by default this one. */
export function registerUse(identity = identify()) {
  mkdirSync(folder, { recursive: true });
  writeFileSync(join(folder, nameOf(identity)), '');
}

/** Takes the note back. */
export function removeUse(identity = identify()) {
  rmSync(join(folder, nameOf(identity)), { force: true });
}

/** How many living processes use the cluster; notes of killed ones are cleared away. */
export function usesLeft() {
  mkdirSync(folder, { recursive: true });
  let count = 0;
  for (const name of readdirSync(folder)) {
    const [pid, startTime] = name.split('-');
    if (isAlive({ pid: Number(pid), startTime })) count += 1;
    else rmSync(join(folder, name), { force: true });
  }
  return count;
}
