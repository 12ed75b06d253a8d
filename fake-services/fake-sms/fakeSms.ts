import { join } from 'node:path';
import express from 'express';
import { controlRoutes } from '#fakes/fake-sms/controlRoutes';
import type { SmsFaultSettings } from '#fakes/fake-sms/faults';
import { Gateway } from '#fakes/fake-sms/gateway';
import { phonePages } from '#fakes/fake-sms/phonePages';
import { restRoutes } from '#fakes/fake-sms/restRoutes';
import { FlowingClock } from '#fakes/fake-clock/flowingClock';
import { listenHttp } from '#fakes/lib/httpListener';
import { servePageFiles } from '#fakes/lib/page';

export interface FakeSmsOptions extends SmsFaultSettings {
  /** Default 0: a free port. */
  port?: number;
  accountSid: string;
  authToken: string;
  /** Our public webhook for texts from people. Without it they are only kept. */
  inboundUrl?: string;
  /** Adds OptOutType to STOP, START and HELP words. Default false. */
  optOutType?: boolean;
  /** Folder of sms-log.jsonl. Without it nothing survives a stop. */
  stateDir?: string;
  /** Default: the machine's time. */
  now?: () => Date;
  /** Zone in which the phones show times. Default UTC. */
  zone?: string;
}

export interface FakeSms {
  url: string;
  gateway: Gateway;
  stop(): Promise<void>;
}

/** Starts the text gateway: the provider's REST API, the control API and the phones, on one port. */
export async function startFakeSms(options: FakeSmsOptions): Promise<FakeSms> {
  const {
    port,
    stateDir,
    now,
    zone = 'UTC',
    accountSid,
    authToken,
    inboundUrl,
    optOutType,
    ...settings
  } = options;
  const machine = new FlowingClock();
  const gateway = new Gateway({
    accountSid,
    authToken,
    inboundUrl,
    optOutType,
    now: now ?? (() => machine.now()),
    logPath: stateDir && join(stateDir, 'sms-log.jsonl'),
    settings,
  });
  const app = express();
  app.disable('x-powered-by');
  app.use(restRoutes(gateway));
  app.use('/_control', controlRoutes(gateway));
  servePageFiles(app, new URL('./public/', import.meta.url));
  app.use(phonePages(gateway, zone));
  const listener = await listenHttp(app, port);
  return { url: listener.url, gateway, stop: () => stop(gateway, () => listener.stop()) };
}

async function stop(gateway: Gateway, close: () => Promise<void>): Promise<void> {
  gateway.stop();
  await close();
}
