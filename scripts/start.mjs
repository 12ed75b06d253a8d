import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { ensureClientBuilt } from './lib/build.mjs';
import { logDir, root, stateDir } from './lib/checkout.mjs';
import { guardCluster, releaseCluster } from './lib/cluster.mjs';
import { registerUse } from './lib/clusterUses.mjs';
import { ensureDatabase } from './lib/databases.mjs';
import { requireRealServices, usualPorts } from './lib/environment.mjs';
import { Failure, failWith } from './lib/failure.mjs';
import { readFlags } from './lib/flags.mjs';
import { tryLock } from './lib/lock.mjs';
import { prepareCheckout } from './lib/prepare.mjs';
import { endProcess, identify } from './lib/processes.mjs';
import { say, step } from './lib/progress.mjs';
import { endRun, isOurs, readRun, removeRun, writeRun } from './lib/runState.mjs';
import { migrate, seedDemo } from './lib/serverCommands.mjs';
import { keepAlive, planStack, startStack } from './lib/stack.mjs';
import { summary } from './lib/summary.mjs';

const flags = readFlags();
const run = { parent: identify(), root, children: [], ready: false, logDir };
let stack;
let ending = false;

function noteChild(child) {
  run.children = [
    ...run.children.filter((one) => one.name !== child.name),
    { name: child.name, ...child.identity },
  ];
  writeRun(run);
  // Should this parent be killed, its children still need the database until somebody ends them.
  if (!process.env.DATABASE_URL) registerUse(child.identity);
}

/** Another start holds the lock: wait until it serves and say where. */
async function showRunning() {
  for (let waited = 0; waited < 600; waited += 1) {
    const other = readRun();
    if (other?.ready && isOurs(other.parent)) return say(`Benchbell is running already.\n${summary(other)}`);
    if (waited === 2) say('Another command is starting Benchbell; waiting for its addresses.');
    await sleep(1_000);
  }
  throw new Failure(
    'Another start of this checkout has not come up in ten minutes: run "npm run stop" and start again.',
  );
}

async function endAll() {
  if (ending) return;
  ending = true;
  say('\nEnding Benchbell …');
  if (stack) await stack.stop();
  else await Promise.all(run.children.map((child) => endProcess(child)));
  removeRun();
  await releaseCluster();
  say('Ended.');
}

function endOnSignal() {
  const since = {};
  for (const name of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
    process.on(name, () => {
      // npm passes Ctrl-C on, so one key press may arrive twice; a later one means "at once".
      if (ending && performance.now() - since.first > 1_000) process.exit(130);
      since.first ??= performance.now();
      void endAll().finally(() => process.exit(0));
    });
  }
}

async function options() {
  const { fakes } = flags;
  if (!fakes) requireRealServices(process.env);
  const { databaseUrl } = await ensureDatabase();
  const host = flags.host ?? process.env.HOST ?? '127.0.0.1';
  const ports = await usualPorts(process.env, host);
  return {
    ...{ databaseUrl, host, ports, fakes, logDir, nodeEnv: 'development', env: process.env },
    at: flags.at,
    stateDir: join(stateDir, 'fakes'),
    watch: flags.dev,
    // Asked, not killed: a worker hands its texts over before it goes.
    endWith: 'TERM',
    extraWeb: flags.dev ? { VITE_DEV: '1' } : {},
    onLine: (name, line) => say(`[${name}] ${line}`),
    onStart: noteChild,
  };
}

/** The demo is made under the fakes' clock and its messages stay in the fakes: without them there is none. */
async function beforeServers({ env }) {
  if (flags.fakes) run.demo = await step('Preparing the demo', () => seedDemo(env));
  if (!flags.dev) await ensureClientBuilt();
  say('  … Starting server and worker');
}

async function bringUp() {
  const chosen = await options();
  const { env } = await planStack(chosen);
  await step('Bringing the database up to date', () => migrate(env));
  stack = await startStack({ ...chosen, beforeServers });
  Object.assign(run, { addresses: stack.addresses, ready: true });
  writeRun(run);
  say(`\nBenchbell is running.\n${summary(run)}`);
  const isEnding = () => ending;
  for (const child of stack.children) void keepAlive(child, say, isEnding);
  if (!process.env.DATABASE_URL) void guardCluster(isEnding);
}

async function main() {
  process.chdir(root);
  await prepareCheckout();
  const lock = await tryLock(join(stateDir, 'start.lock'));
  if (!lock) return showRunning();
  // Nobody holds the lock, so whatever is noted was left by a start that was killed.
  const left = readRun();
  if (left) await endRun(left);
  writeRun(run);
  endOnSignal();
  try {
    await bringUp();
  } catch (error) {
    if (ending) return;
    await endAll();
    failWith(error);
  }
}

main().catch(failWith);
