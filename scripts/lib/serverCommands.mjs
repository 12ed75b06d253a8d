import { spawn } from 'node:child_process';
import { root } from './checkout.mjs';
import { tsxArguments } from './child.mjs';
import { Failure } from './failure.mjs';
import { capture, exitOf } from './progress.mjs';

/** Runs one of server/cli and gives what it printed. */
export async function runServerCommand(file, { env, args = [] }) {
  const done = await capture(process.execPath, tsxArguments(file, { args }), { cwd: root, env });
  if (done.code === 0) return done.stdout;
  const end = `${done.stdout}\n${done.stderr}`.trim().split('\n').slice(-20).join('\n');
  throw new Failure(`${file} failed (${done.code}):\n${end}`);
}

/** Brings the database's tables up to date. */
export function migrate(env) {
  return runServerCommand('server/cli/migrate.ts', { env });
}

/** Fills an empty database with the demo; answers its shops and sign-ins. */
export async function seedDemo(env) {
  const printed = await runServerCommand('server/cli/seedDemo.ts', { env });
  return lastJson(printed);
}

/** The last line of an output, read as JSON. */
export function lastJson(text) {
  const line = text.trimEnd().split('\n').at(-1) ?? '';
  try {
    return JSON.parse(line);
  } catch {
    throw new Failure(`Expected a line of JSON at the end, got: ${line.slice(0, 200)}`);
  }
}

/** Runs a command in the foreground with the terminal's own input and output; answers its exit code. */
export async function runInForeground(command, args, options = {}) {
  return exitOf(spawn(command, args, { cwd: root, stdio: 'inherit', ...options }));
}
