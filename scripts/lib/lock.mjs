import { mkdirSync } from 'node:fs';
import { dirname } from 'node:path';
import { spawn } from 'node:child_process';
import { say } from './progress.mjs';

/**
 * A lock that the kernel gives back even when its holder is killed: a small child holds it for as long as
 * the pipe to us is open. Detached, so that Ctrl-C reaches us first and not the holder.
 */
function hold(path, mode) {
  mkdirSync(dirname(path), { recursive: true });
  const args = [mode, path, 'sh', '-c', 'echo held; exec cat >/dev/null'];
  const child = spawn('flock', args, { stdio: ['pipe', 'pipe', 'ignore'], detached: true, cwd: '/' });
  return new Promise((resolve, reject) => {
    child.once('error', reject);
    child.once('exit', () => resolve(undefined));
    child.stdout.once('data', () => resolve({ release: () => letGo(child) }));
  });
}

function letGo(child) {
  return new Promise((resolve) => {
    child.once('exit', resolve);
    child.stdin.end();
  });
}

/** Takes the lock at once or answers undefined. */
export function tryLock(path) {
  return hold(path, '-n');
}

/** Runs `work` while no other process of this machine runs work under the same path. */
export async function withLock(path, work) {
  const notice = setTimeout(() => say('  … waiting for another command of this checkout'), 2_000);
  const lock = await hold(path, '-x');
  clearTimeout(notice);
  if (!lock) throw new Error(`flock could not lock ${path}`);
  try {
    return await work();
  } finally {
    await lock.release();
  }
}
