import { join } from 'node:path';
import express from 'express';
import { FlowingClock } from '#fakes/fake-clock/flowingClock';
import { controlRoutes } from '#fakes/fake-mail/controlRoutes';
import type { MailFault, MailFaultSettings } from '#fakes/fake-mail/faults';
import { inboxPages } from '#fakes/fake-mail/inboxPages';
import { MailStore } from '#fakes/fake-mail/mailStore';
import { SmtpSink } from '#fakes/fake-mail/smtpSink';
import { FaultBook } from '#fakes/lib/faultBook';
import { listenHttp } from '#fakes/lib/httpListener';
import { servePageFiles } from '#fakes/lib/page';

export interface FakeMailOptions extends MailFaultSettings {
  /** Default 0: a free port. */
  httpPort?: number;
  /** Default 0: a free port. */
  smtpPort?: number;
  /** Folder of mail-log.jsonl. Without it nothing survives a stop. */
  stateDir?: string;
  /** Default: the machine's time. */
  now?: () => Date;
  /** Zone in which the inbox shows times. Default UTC. */
  zone?: string;
}

export interface FakeMail {
  url: string;
  smtpUrl: string;
  store: MailStore;
  faults: FaultBook<MailFault>;
  stop(): Promise<void>;
}

/** Starts the mail sink: SMTP on one port, the inbox and the control API on another. */
export async function startFakeMail(options: FakeMailOptions = {}): Promise<FakeMail> {
  const { httpPort, smtpPort = 0, stateDir, now, zone = 'UTC', seed = 1 } = options;
  const machine = new FlowingClock();
  const store = await MailStore.open(
    now ?? (() => machine.now()),
    stateDir && join(stateDir, 'mail-log.jsonl'),
  );
  const faults = new FaultBook<MailFault>(seed);
  faults.add(options.faults ?? []);
  const sink = new SmtpSink(store, faults);
  const bound = await sink.listen(smtpPort);
  const app = express();
  app.disable('x-powered-by');
  app.use('/_control', controlRoutes(store, faults));
  servePageFiles(app, new URL('./public/', import.meta.url));
  app.use(inboxPages(store, zone));
  const listener = await listenHttp(app, httpPort);
  const stop = async (): Promise<void> => {
    await Promise.all([sink.stop(), listener.stop()]);
    store.close();
  };
  return { url: listener.url, smtpUrl: `smtp://127.0.0.1:${bound}`, store, faults, stop };
}
