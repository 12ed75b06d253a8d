import { mkdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import {
  ensureClientBuilt,
  migrate,
  newTestDatabase,
  openTestServer,
  prepareCheckout,
  releaseCluster,
  root,
  seedDemo,
  startStack,
} from '../../../scripts/lib/harness.mjs';

/** When the browser run begins by the shop's clock: in the forenoon of an open day, whenever it is run. */
const startAt = '10:00';

async function boot(logDir: string) {
  const server = await openTestServer();
  const database = await newTestDatabase(server);
  const beforeServers = async ({ env }: { env: Record<string, string | undefined> }) => {
    await migrate(env);
    process.env.E2E_DEMO = JSON.stringify(await seedDemo(env));
  };
  // The limits hold in tests as well, and count by address: each test brings its own.
  const extraWeb = { TRUSTED_HOPS: '1' };
  const stack = await startStack({ databaseUrl: database.url, logDir, at: startAt, beforeServers, extraWeb });
  return { stack, database };
}

/** Starts a whole Benchbell with a fresh demo on free ports; the tests find it by E2E_* variables. */
export default async function globalSetup(): Promise<() => Promise<void>> {
  await prepareCheckout();
  await ensureClientBuilt();
  const logDir = join(root, '.benchbell', 'e2e');
  rmSync(logDir, { recursive: true, force: true });
  mkdirSync(logDir, { recursive: true });
  const { stack, database } = await boot(logDir);
  const { web, sms, mail, clock } = stack.addresses;
  Object.assign(process.env, {
    E2E_BASE_URL: web,
    E2E_SMS_URL: sms,
    E2E_MAIL_URL: mail,
    E2E_CLOCK_URL: clock,
  });
  return async () => {
    await stack.stop();
    await database.drop();
    await releaseCluster();
  };
}
