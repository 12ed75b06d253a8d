import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { root } from './checkout.mjs';
import { runLogged, step } from './progress.mjs';

function readJson(path) {
  try {
    return JSON.parse(readFileSync(path, 'utf8'));
  } catch {
    return undefined;
  }
}

/**
 * True when what npm last installed is what the lock file asks for. Compared by version, since a clone or a
 * branch switch gives files new times; optional packages of other platforms may be missing.
 */
export function isInstalled(wanted, installed) {
  if (!installed) return false;
  return Object.entries(wanted.packages).every(([path, entry]) => {
    if (path === '') return true;
    const found = installed.packages[path];
    return found ? found.version === entry.version : Boolean(entry.optional || entry.devOptional);
  });
}

/** Installs the packages of package-lock.json unless they are there already. */
export async function ensureInstalled() {
  const wanted = readJson(join(root, 'package-lock.json'));
  const installed = readJson(join(root, 'node_modules', '.package-lock.json'));
  if (isInstalled(wanted, installed)) return;
  // Development packages build the client and run the tests, whatever NODE_ENV says.
  const args = ['ci', '--include=dev', '--no-audit', '--no-fund'];
  await step('Installing packages (npm ci)', () => runLogged('npm', 'npm', args));
}
