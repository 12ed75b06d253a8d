import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { appRole, ownerRole } from './checkout.mjs';
import { Child } from './child.mjs';
import { addressesOf, fakesEnvironment, serverEnvironment, testPorts } from './environment.mjs';
import { ensureSecrets } from './secrets.mjs';

function addressesLine(line) {
  if (!line.startsWith('{')) return undefined;
  try {
    const found = JSON.parse(line);
    return found.sms && found.clock ? found : undefined;
  } catch {
    return undefined;
  }
}

async function launch(options) {
  const child = new Child(options);
  try {
    child.said = await child.start();
    return child;
  } catch (error) {
    await child.stop();
    throw error;
  }
}

/** Starts a web server; ready when it listens. `env.PORT` decides where. */
export function spawnWeb(options) {
  const ready = (line) => /listening (https?:\/\/[\w.:[\]-]+)/.exec(line)?.[1];
  return launch({ name: 'web', file: 'server/web.ts', ready, ...options });
}

/** Starts a worker; ready when it takes tasks. */
export function spawnWorker(options) {
  return launch({
    name: 'worker',
    file: 'server/worker.ts',
    ready: (line) => (line.includes('worker ready') ? true : undefined),
    ...options,
  });
}

/** Starts the fake services; answers with their addresses in `said`. */
export function spawnFakes(options) {
  return launch({ name: 'fakes', file: 'fake-services/main.ts', ready: addressesLine, ...options });
}

/**
 * Everything that is known before the first process starts: ports, addresses and environment.
 * Without ports, free ones for a test are chosen.
 */
export async function planStack({
  databaseUrl,
  ports,
  host,
  env = process.env,
  extra = {},
  nodeEnv = 'test',
  fakes = true,
}) {
  const chosen = ports ?? (await testPorts());
  const addresses = addressesOf(chosen, { host, env: nodeEnv === 'test' ? {} : env, fakes });
  const secrets = await ensureSecrets(env);
  const database = { databaseUrl, appRole, ownerRole };
  const base = serverEnvironment({ database, secrets, ports: chosen, addresses, host, nodeEnv, env });
  return { ports: chosen, addresses, env: { ...base, ...extra } };
}

/**
 * Starts fakes, web servers and workers against a migrated database.
 * `beforeServers` runs once the fakes serve (the demo is seeded there, under the fakes' clock).
 * @returns addresses, env, the children by kind, and stop()
 */
export async function startStack(options) {
  const {
    logDir,
    fakes = true,
    webs = 1,
    workers = 1,
    at,
    stateDir,
    watch,
    onLine,
    onStart,
    extraWeb = {},
  } = options;
  const plan = await planStack(options);
  const children = [];
  const note = (child) => {
    if (!children.includes(child)) children.push(child);
    onStart?.(child);
  };
  const common = { logDir, watch, onLine, onStart: note, endWith: options.endWith };
  const stop = () => stopAll(children);
  try {
    const started = { fakes: undefined, webs: [], workers: [] };
    if (fakes) {
      const folder = stateDir ?? join(logDir, 'fakes');
      const env = fakesEnvironment({
        base: plan.env,
        ports: plan.ports,
        addresses: plan.addresses,
        folder,
        at,
      });
      started.fakes = await spawnFakes({ ...common, env });
    }
    await options.beforeServers?.(plan);
    for (let n = 0; n < webs; n += 1) {
      const port = n === 0 ? plan.ports.web : (await testPorts()).web;
      const name = n === 0 ? 'web' : `web-${n + 1}`;
      started.webs.push(
        await spawnWeb({ ...common, name, env: { ...plan.env, ...extraWeb, PORT: String(port) } }),
      );
    }
    for (let n = 0; n < workers; n += 1) {
      const name = n === 0 ? 'worker' : `worker-${n + 1}`;
      started.workers.push(await spawnWorker({ ...common, name, env: plan.env }));
    }
    return { ...plan, ...started, children, stop };
  } catch (error) {
    await stop();
    throw error;
  }
}

/** Servers first and together, the fakes after them: what is in flight can still be delivered. */
async function stopAll(children) {
  const isFake = (child) => child.name === 'fakes';
  await Promise.all(children.filter((child) => !isFake(child)).map((child) => child.stop()));
  await Promise.all(children.filter(isFake).map((child) => child.stop()));
}

/** Starts a child again whenever it dies by itself, slower each time it dies young. */
export async function keepAlive(child, say, isEnding) {
  for (let delay = 1_000; ; delay = Math.min(delay * 2, 30_000)) {
    const since = performance.now();
    const how = await child.exited;
    if (isEnding() || child.ending) return;
    if (performance.now() - since > 60_000) delay = 1_000;
    say(
      `The ${child.name} ended (${how}); starting it again in ${delay / 1000} s. Its log: ${child.logFile}`,
    );
    await sleep(delay);
    if (isEnding()) return;
    await child.start().catch((error) => say(error.message));
  }
}
