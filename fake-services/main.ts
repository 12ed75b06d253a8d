import { startFakeClock } from '#fakes/fake-clock/fakeClock';
import { startFakeMail } from '#fakes/fake-mail/fakeMail';
import { startFakeSms } from '#fakes/fake-sms/fakeSms';

const environment = process.env;

function portOf(name: string): number {
  const port = Number(environment[name] ?? 0);
  if (Number.isInteger(port) && port >= 0 && port < 65536) return port;
  throw new Error(`${name} must be a port number, not "${environment[name]}".`);
}

function needed(name: string): string {
  const value = environment[name];
  if (value) return value;
  throw new Error(`${name} is missing.`);
}

/** Starts all three on one clock and returns how to end them. */
async function startAll(): Promise<{ addresses: Record<string, string>; stop(): Promise<void> }> {
  const zone = environment.FAKE_START_ZONE ?? 'UTC';
  const stateDir = environment.FAKE_STATE_DIR;
  const clock = await startFakeClock({
    port: portOf('FAKE_CLOCK_PORT'),
    startAt: environment.FAKE_START_AT,
    zone,
  });
  const common = { stateDir, zone, now: () => clock.clock.now() };
  const sms = await startFakeSms({
    ...common,
    port: portOf('FAKE_SMS_PORT'),
    accountSid: needed('TWILIO_ACCOUNT_SID'),
    authToken: needed('TWILIO_AUTH_TOKEN'),
    inboundUrl: environment.FAKE_SMS_INBOUND_URL,
  });
  const mail = await startFakeMail({
    ...common,
    httpPort: portOf('FAKE_MAIL_HTTP_PORT'),
    smtpPort: portOf('FAKE_MAIL_SMTP_PORT'),
  });
  return {
    addresses: { sms: sms.url, mail: mail.url, smtp: mail.smtpUrl, clock: clock.url },
    stop: async () => void (await Promise.all([sms.stop(), mail.stop(), clock.stop()])),
  };
}

try {
  const fakes = await startAll();
  const end = (): void => void fakes.stop().then(() => process.exit(0));
  process.once('SIGTERM', end);
  process.once('SIGINT', end);
  process.stdout.write(`${JSON.stringify(fakes.addresses)}\n`);
} catch (error) {
  process.stderr.write(
    `The stand-in services did not start. ${error instanceof Error ? error.message : String(error)}\n`,
  );
  process.exit(1);
}
