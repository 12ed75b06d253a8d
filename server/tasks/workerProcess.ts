/** A worker as a process of its own: environment, clock, connections, a line that says it works, an end in order. */
import { startClock } from '#server/lib/clock';
import type { Services } from '#server/lib/context';
import { openDb, POOLS, refuseStrongRole } from '#server/lib/db';
import { createLogger } from '#server/lib/logger';
import { openMailGateway } from '#server/lib/mail';
import { openSmsGateway } from '#server/lib/sms';
import { parseEnv } from '#server/env';
import type { Senders } from './sendMessage';
import { startWorker } from './startWorker';

/** Runs until it is asked to end. `replace` swaps parts of the way out, for a harness that shows what they are for. */
export async function runWorkerProcess(replace: Partial<Senders> = {}): Promise<void> {
  const env = parseEnv(process.env);
  const log = createLogger(env, 'worker');
  const clock = await startClock(env.CLOCK_URL);
  const services: Services = { env, log, clock };
  const { DATABASE_URL: url, DB_APP_ROLE: role } = env;
  const db = openDb({ url, role, pool: POOLS.worker, applicationName: 'benchbell worker' });
  await refuseStrongRole(db);
  const sms = openSmsGateway(env);
  const mail = openMailGateway(env);
  const senders = { sms, mail, lookUp: (to: string) => sms.findSent(to), ...replace };
  const worker = await startWorker(services, senders);
  worker.ended.catch((error: unknown) => {
    log.fatal({ err: error }, 'the queue ended');
    process.exit(1);
  });
  process.stdout.write('worker ready\n');
  onSignal(async () => {
    await worker.stop();
    mail.close();
    clock.stop();
    await db.close();
  });
}

function onSignal(end: () => Promise<void>): void {
  const stop = (): void => void end().then(() => process.exit(0));
  process.once('SIGTERM', stop);
  process.once('SIGINT', stop);
}
