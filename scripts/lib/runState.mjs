import { existsSync, mkdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { root, stateDir } from './checkout.mjs';
import { endProcess, isAlive, readProcess } from './processes.mjs';

const path = join(stateDir, 'run.json');

/** What a running `npm start` wrote about itself, or undefined. */
export function readRun() {
  if (!existsSync(path)) return undefined;
  try {
    return JSON.parse(readFileSync(path, 'utf8'));
  } catch {
    return undefined;
  }
}

/** Writes it whole or not at all: another command may read at any moment. */
export function writeRun(run) {
  mkdirSync(stateDir, { recursive: true });
  writeFileSync(`${path}.new`, `${JSON.stringify(run, null, 2)}\n`, { mode: 0o600 });
  renameSync(`${path}.new`, path);
}

/** Forgets the run. */
export function removeRun() {
  rmSync(path, { force: true });
}

/** True when the process is the one noted and works in this checkout: numbers are given out again. */
export function isOurs(identity, read = readProcess) {
  return isAlive(identity, read) && read(identity.pid)?.cwd === root;
}

/** Ends what a run left: the parent first, which ends the rest itself, then whatever still lives. */
export async function endRun(run) {
  const parent = run.parent && isOurs(run.parent) ? run.parent : undefined;
  if (parent) await endProcess(parent, 25_000);
  const left = (run.children ?? []).filter((child) => isOurs(child));
  await Promise.all(left.map((child) => endProcess(child)));
  removeRun();
  return { parent: Boolean(parent), left: left.length };
}
