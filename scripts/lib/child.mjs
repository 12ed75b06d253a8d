import { spawn } from 'node:child_process';
import { createWriteStream, mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { root } from './checkout.mjs';
import { Failure } from './failure.mjs';
import { endProcess, identify } from './processes.mjs';
import { tail } from './progress.mjs';

const tsxCli = join(root, 'node_modules', 'tsx', 'dist', 'cli.mjs');

/** The Node.js arguments that run a TypeScript file: one process, so that a signal meets the program itself. */
export function tsxArguments(file, { watch = false, args = [] } = {}) {
  if (watch) return [tsxCli, 'watch', '--clear-screen=false', file, ...args];
  return ['--import', 'tsx', file, ...args];
}

/** What of a log line belongs on the screen: pino's errors in short, anything that is no log line as it is. */
export function screenLine(line, isErrorStream) {
  if (!line.startsWith('{')) return isErrorStream && line.trim() ? line : undefined;
  try {
    const entry = JSON.parse(line);
    if (!(entry.level >= 50)) return undefined;
    return [entry.msg, entry.err?.message].filter(Boolean).join(': ');
  } catch {
    return undefined;
  }
}

/**
 * One process of Benchbell in a group of its own, with its output in a log file.
 * `ready` picks from an output line what the process says once it serves; `onLine` sees what belongs on screen.
 */
export class Child {
  /** @param {{name: string, file: string, env: object, logDir: string, watch?: boolean, ready: Function, onLine?: Function, onStart?: Function, endWith?: string}} options */
  constructor(options) {
    this.options = options;
    this.name = options.name;
    this.logFile = join(options.logDir, `${options.name}.log`);
    mkdirSync(options.logDir, { recursive: true });
  }

  /** Starts the process and answers, when it is ready, what `ready` picked. */
  start() {
    const { file, env, watch } = this.options;
    this.ending = false;
    // The kernel ends the process when we are killed: nothing is left running that nobody looks after.
    const bond = ['--pdeathsig', this.options.endWith ?? 'KILL', '--', process.execPath];
    const child = spawn('setpriv', [...bond, ...tsxArguments(file, { watch })], {
      cwd: root,
      env,
      detached: true,
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    this.pid = child.pid;
    this.identity = identify(child.pid);
    // Noted at once, so that an interrupted start still knows what to end.
    this.options.onStart?.(this);
    this.exited = new Promise((resolve) => child.once('exit', (code, signal) => resolve(signal ?? code)));
    return this.#untilReady(child);
  }

  #untilReady(child) {
    const log = createWriteStream(this.logFile, { flags: 'a', mode: 0o600 });
    let missing = 2;
    return new Promise((resolve, reject) => {
      const timer = setTimeout(() => reject(this.#failure('is not ready after 90 s')), 90_000);
      const read = (line, isErrorStream) => {
        log.write(`${line}\n`);
        const picked = this.options.ready(line);
        if (picked !== undefined) resolve(picked);
        const shown = screenLine(line, isErrorStream);
        if (shown !== undefined) this.options.onLine?.(this.name, shown);
      };
      for (const stream of [child.stdout, child.stderr]) {
        createInterface({ input: stream })
          .on('line', (line) => read(line, stream === child.stderr))
          .on(
            'close',
            () => (missing -= 1) === 0 && log.end(() => reject(this.#failure('ended before it was ready'))),
          );
      }
      void this.exited.then(() => clearTimeout(timer));
    });
  }

  #failure(what) {
    return new Failure(`The ${this.name} ${what}. The end of ${this.logFile}:\n${tail(this.logFile, 30)}`);
  }

  /** Sends a signal to the process and waits until it has ended. */
  async kill(signal = 'SIGKILL') {
    this.ending = true;
    try {
      process.kill(-this.pid, signal);
    } catch {
      // It has ended already.
    }
    return this.exited;
  }

  /** Asks the process to end and insists after `graceMs`. */
  async stop(graceMs = 10_000) {
    if (!this.pid) return;
    this.ending = true;
    await endProcess(this.identity, graceMs);
  }

  /** Ends the process in whatever state it is and starts it again; answers when it is ready. */
  async restart() {
    await this.kill('SIGKILL');
    return this.start();
  }
}
