import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { createApp } from './app';
import { parseEnv } from './env';
import { startClock } from '#server/lib/clock';
import { openDb, POOLS, refuseStrongRole } from '#server/lib/db';
import { createLogger } from '#server/lib/logger';

const env = parseEnv(process.env);
const log = createLogger(env, 'web');
const clock = await startClock(env.CLOCK_URL);
const db = openDb({
  url: env.DATABASE_URL,
  role: env.DB_APP_ROLE,
  pool: POOLS.web,
  applicationName: 'benchbell web',
});
await refuseStrongRole(db);

const server = createServer(await createApp({ env, clock, log }));
server.listen(env.PORT, env.HOST, () => {
  const { port } = server.address() as AddressInfo;
  process.stdout.write(`listening http://${env.HOST}:${port}\n`);
});

const DRAIN_MS = 8000;
async function stop(): Promise<void> {
  const cut = setTimeout(() => server.closeAllConnections(), DRAIN_MS);
  server.closeIdleConnections();
  await new Promise((resolve) => server.close(resolve));
  clearTimeout(cut);
  clock.stop();
  await db.close();
  process.exit(0);
}
process.once('SIGTERM', () => void stop());
process.once('SIGINT', () => void stop());
