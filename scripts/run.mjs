import { releaseCluster } from './lib/cluster.mjs';
import { tsxArguments } from './lib/child.mjs';
import { ensureDatabase } from './lib/databases.mjs';
import { addressesOf, serverEnvironment } from './lib/environment.mjs';
import { Failure, failWith } from './lib/failure.mjs';
import { prepareCheckout } from './lib/prepare.mjs';
import { isOurs, readRun } from './lib/runState.mjs';
import { ensureSecrets } from './lib/secrets.mjs';
import { migrate, runInForeground } from './lib/serverCommands.mjs';

const usual = { web: Number(process.env.PORT) || 5180, sms: 5181, mail: 5182, smtp: 5183, clock: 5184 };

/** The addresses of the running Benchbell, so that a printed link leads there. */
function runningAddresses() {
  const run = readRun();
  return run?.ready && isOurs(run.parent) ? run.addresses : undefined;
}

/** Without a running one the usual addresses, unless the environment names real services. */
function restingAddresses() {
  const fakes = process.env.NODE_ENV !== 'production' && !process.env.SMTP_URL;
  const { clock: _notServing, ...addresses } = addressesOf(usual, { env: process.env, fakes });
  return addresses;
}

async function environment() {
  const database = await ensureDatabase();
  const secrets = await ensureSecrets();
  const addresses = runningAddresses() ?? restingAddresses();
  const nodeEnv = process.env.NODE_ENV ?? 'development';
  return serverEnvironment({ database, secrets, ports: usual, addresses, nodeEnv, env: process.env });
}

async function main() {
  const [file, ...args] = process.argv.slice(2);
  if (!file) throw new Failure('usage: node scripts/run.mjs FILE [arguments]');
  await prepareCheckout();
  try {
    const env = await environment();
    if (!file.endsWith('/migrate.ts')) await migrate(env);
    const code = await runInForeground(process.execPath, tsxArguments(file, { args }), { env });
    process.exitCode = typeof code === 'number' ? code : 1;
  } finally {
    await releaseCluster();
  }
}

main().catch(failWith);
