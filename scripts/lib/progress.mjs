import { mkdirSync, openSync, closeSync, readFileSync } from 'node:fs';
import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { Failure } from './failure.mjs';
import { logDir, root } from './checkout.mjs';

const tty = process.stdout.isTTY === true;
const seconds = (since) => `${((performance.now() - since) / 1000).toFixed(1)} s`;

/** One line for the person who waits. */
export function say(line = '') {
  process.stdout.write(`${line}\n`);
}

/**
 * Shows that `label` is under way, with the seconds gone by, until `work` has ended.
 * A terminal gets one line that is rewritten, a log a line now and then.
 */
export async function step(label, work) {
  const since = performance.now();
  const stop = showElapsed(label, since);
  try {
    const result = await work();
    stop();
    say(`${tty ? '\r\x1b[K' : ''}  ✓ ${label} (${seconds(since)})`);
    return result;
  } catch (error) {
    stop();
    say(`${tty ? '\r\x1b[K' : ''}  ✗ ${label} (${seconds(since)})`);
    throw error;
  }
}

function showElapsed(label, since) {
  if (tty) process.stdout.write(`  … ${label}`);
  else say(`  … ${label}`);
  const show = () =>
    tty
      ? process.stdout.write(`\r\x1b[K  … ${label} ${seconds(since)}`)
      : say(`    still at it: ${label}, ${seconds(since)}`);
  const timer = setInterval(show, tty ? 1000 : 15_000);
  return () => clearInterval(timer);
}

/** The last lines of a log, for a message about what went wrong. */
export function tail(path, lines = 15) {
  try {
    return readFileSync(path, 'utf8').trimEnd().split('\n').slice(-lines).join('\n');
  } catch {
    return '';
  }
}

/** Runs a command with its output in a log; when it fails, says so with the end of that log. */
export async function runLogged(name, command, args, options = {}) {
  mkdirSync(logDir, { recursive: true });
  const path = join(logDir, `${name}.log`);
  const log = openSync(path, 'a');
  try {
    const child = spawn(command, args, { cwd: root, ...options, stdio: ['ignore', log, log] });
    const code = await exitOf(child);
    if (code !== 0) {
      throw new Failure(`${command} ${args.join(' ')} failed (${code}). The end of ${path}:\n${tail(path)}`);
    }
  } finally {
    closeSync(log);
  }
}

/** Runs a command quietly and gives its exit code and output; never throws for a non-zero code. */
export async function capture(command, args, options = {}) {
  const child = spawn(command, args, { ...options, stdio: ['ignore', 'pipe', 'pipe'] });
  let stdout = '';
  let stderr = '';
  child.stdout.setEncoding('utf8').on('data', (text) => (stdout += text));
  child.stderr.setEncoding('utf8').on('data', (text) => (stderr += text));
  return { code: await exitOf(child), stdout, stderr };
}

/** The exit code of a child, or the signal or error that ended it. */
export function exitOf(child) {
  return new Promise((resolve) => {
    child.once('error', (error) => resolve(error.message));
    child.once('close', (code, signal) => resolve(code ?? signal));
  });
}
