/**
 * The application with its gateways and its queue, in this process: the fakes listen on their own ports, the server on
 * its public address, and tasks run when a test says so, at the hour that the test has set.
 */
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { randomUUID } from 'node:crypto';
import { Logger, runOnce } from 'graphile-worker';
import { Pool } from 'pg';
import { startFakeMail } from '#fakes/fake-mail/fakeMail';
import type { MailFault } from '#fakes/fake-mail/faults';
import type { StoredMail } from '#fakes/fake-mail/mailStore';
import { startFakeSms, type FakeSms } from '#fakes/fake-sms/fakeSms';
import type { SmsMessage } from '#fakes/fake-sms/message';
import { asRole, rows, withShop } from '#server/lib/db';
import { openMailGateway } from '#server/lib/mail';
import { openSmsGateway } from '#server/lib/sms';
import { Message, Notice } from '#server/models/index';
import { watchPool } from '#server/lib/watchPool';
import { beat } from '#server/tasks/heartbeat';
import { sendMessage, type Senders } from '#server/tasks/sendMessage';
import { sweepDue } from '#server/tasks/sweeper';
import type { TaskPayloads } from '#server/lib/queue';
import { startTestApp, type TestApp } from '../../support/testApp';
import type { TestShop } from '../../support/factories';

export interface Outbox {
  app: TestApp;
  sms: FakeSms;
  /** Breaks and mends the mail server. */
  mail: { set(faults: MailFault[]): void };
  senders: Senders;
  owner: Pool;
  /** Puts in what is due and runs tasks until nothing is left to do at this instant. */
  work(): Promise<void>;
  /** Texts that the gateway took for a phone, oldest first. */
  textsTo(phone: string | null): SmsMessage[];
  /** Mails that arrived for an address, oldest first. */
  mailsTo(address: string | null): Promise<StoredMail[]>;
  messagesOf(shop: TestShop): Promise<Message[]>;
  noticesOf(shop: TestShop): Promise<Notice[]>;
  stop(): Promise<void>;
}

const SID = `AC${'0'.repeat(32)}`;
const TOKEN = 'token-of-the-fake';

/** A port on which nothing answers yet; the application is put behind it when it is there. */
async function reserveAddress() {
  const server = createServer();
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  return { server, url: `http://127.0.0.1:${(server.address() as AddressInfo).port}` };
}

/** Starts it all. Stop it in afterAll. */
export async function startOutbox(): Promise<Outbox> {
  const { server, url } = await reserveAddress();
  let now = (): Date => new Date();
  const clock = { now: () => now() };
  const inboundUrl = `${url}/hooks/sms/inbound`;
  const callbacks = { delayMs: 1 };
  const sms = await startFakeSms({ accountSid: SID, authToken: TOKEN, inboundUrl, callbacks, ...clock });
  const mail = await startFakeMail({ ...clock });
  const env = {
    PUBLIC_URL: url,
    TWILIO_ACCOUNT_SID: SID,
    TWILIO_AUTH_TOKEN: TOKEN,
    TWILIO_API_BASE: sms.url,
    SMTP_URL: mail.smtpUrl,
    MAIL_FROM: 'bell@benchbell.example',
  };
  const app = await startTestApp({ env });
  now = () => app.clock.now();
  server.on('request', app.express);
  const connectionString = asRole(app.env.DATABASE_URL, app.env.DB_OWNER_ROLE);
  const owner = new Pool({ connectionString, max: 4 });
  watchPool(owner, app.services.log);
  const gateway = openSmsGateway(app.env);
  const mailGateway = openMailGateway(app.env);
  const senders: Senders = { sms: gateway, mail: mailGateway, lookUp: (to) => gateway.findSent(to) };
  return {
    app,
    sms,
    mail: { set: (faults) => void mail.faults.add(faults) },
    senders,
    owner,
    work: () => work(app, senders, owner),
    textsTo: (phone) =>
      sms.gateway.store.all().filter((text) => text.to === phone && text.direction !== 'inbound'),
    mailsTo: async (address) => mailsAt(mail.url, address),
    messagesOf: (shop) => withShop(shop.id, () => Message.findAll({ order: ['createdAt', 'id'] })),
    noticesOf: (shop) => withShop(shop.id, () => Notice.findAll({ order: ['createdAt', 'id'] })),
    stop: async () => {
      server.closeAllConnections();
      server.close();
      mailGateway.close();
      await Promise.all([owner.end(), sms.stop(), mail.stop()]);
      await app.stop();
    },
  };
}

async function mailsAt(url: string, address: string | null): Promise<StoredMail[]> {
  const answer = await fetch(`${url}/_control/messages?to=${encodeURIComponent(address ?? '')}`);
  return ((await answer.json()) as { messages: StoredMail[] }).messages;
}

/** The queue's chatter stays out; a task that throws is a fault of ours and fails the test. */
function strictLogger(faults: string[]): Logger {
  return new Logger(() => (level, message) => {
    if (String(level) === 'error') faults.push(message);
  });
}

const WORKER = `test-${randomUUID()}`;

async function work(app: TestApp, senders: Senders, owner: Pool): Promise<void> {
  await beat(WORKER, 'pool-of-the-test');
  const taskList = {
    send_message: (payload: unknown) =>
      sendMessage(app.services, senders, WORKER, payload as TaskPayloads['send_message']),
  };
  const faults: string[] = [];
  const logger = strictLogger(faults);
  for (let round = 0; round < 10; round += 1) {
    const queued = await sweepDue(app.services, owner);
    await runOnce({ pgPool: owner, taskList, logger, noHandleSignals: true });
    if (faults.length > 0) throw new Error(faults.join('\n'));
    if (queued === 0) return;
  }
}

/** Waits until something holds, for what comes by a callback. */
export async function until(what: string, holds: () => Promise<boolean> | boolean): Promise<void> {
  for (let tries = 0; tries < 200; tries += 1) {
    if (await holds()) return;
    await new Promise((resolve) => setTimeout(resolve, 25));
  }
  throw new Error(`it never came about that ${what}`);
}

/** How many tasks the queue holds. */
export async function queuedTasks(owner: Pool): Promise<number> {
  const { rows: found } = await owner.query<{ n: number }>(
    'select count(*)::int as n from graphile_worker.jobs',
  );
  return found[0]?.n ?? 0;
}

/** The consent that a booking records, given by hand. */
export async function agreeToTexts(shop: TestShop, personId: string, at: Date): Promise<void> {
  await withShop(shop.id, async () => {
    await rows(
      `insert into consents (shop_id, id, person_id, phone, kind, wording, language, source, at)
       select shop_id, gen_random_uuid(), id, phone, 'given', 'texts are fine', 'en', 'test', $2
       from people where id = $1 returning id`,
      [personId, at],
    );
  });
}
