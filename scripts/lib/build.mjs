import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { root, stateDir } from './checkout.mjs';
import { withLock } from './lock.mjs';
import { runLogged, step } from './progress.mjs';

const sources = ['src', 'shared', 'public', 'index.html', 'stub.html', 'vite.config.ts', 'package-lock.json'];
const stamp = join(stateDir, 'build-stamp');

function* filesBelow(path) {
  if (!existsSync(path)) return;
  if (statSync(path).isFile()) return yield path;
  for (const name of readdirSync(path).sort()) yield* filesBelow(join(path, name));
}

/** A hash over the names and contents of everything the client is built from; tests do not count. */
export function fingerprint(folder = root) {
  const hash = createHash('sha256');
  for (const source of sources) {
    for (const file of filesBelow(join(folder, source))) {
      if (!/\.test\.\w+$/.test(file)) {
        hash.update(file.slice(folder.length)).update('\0').update(readFileSync(file));
      }
    }
  }
  return hash.digest('hex');
}

function isBuilt(wanted) {
  return (
    existsSync(join(root, 'dist', 'index.html')) &&
    existsSync(stamp) &&
    readFileSync(stamp, 'utf8') === wanted
  );
}

/** Builds the client unless dist/ was built from these very sources. */
export async function ensureClientBuilt() {
  mkdirSync(stateDir, { recursive: true });
  await withLock(join(stateDir, 'build.lock'), async () => {
    const wanted = fingerprint();
    if (isBuilt(wanted)) return;
    const vite = join('node_modules', 'vite', 'bin', 'vite.js');
    const env = { ...process.env, NODE_ENV: 'production' };
    await step('Building the client', () => runLogged('build', process.execPath, [vite, 'build'], { env }));
    writeFileSync(stamp, wanted);
  });
}
