import { networkInterfaces } from 'node:os';
import { join } from 'node:path';
import { stateDir } from './checkout.mjs';
import { Failure } from './failure.mjs';
import { nextFreePort, randomFreePort } from './ports.mjs';

/** The ports a person gets to see, each the next free one from its usual number. */
export async function usualPorts(env = process.env, host = '127.0.0.1') {
  const web = await nextFreePort(Number(env.PORT) || 5180, { host });
  const sms = await nextFreePort(5181, { taken: [web] });
  const mail = await nextFreePort(5182, { taken: [web, sms] });
  return { web, sms, mail, ...(await hiddenPorts()) };
}

async function hiddenPorts() {
  const smtp = await randomFreePort();
  return { smtp, clock: await randomFreePort({ pick: () => smtp + 1 + Math.floor(Math.random() * 500) }) };
}

/** Ports for a test: none that anybody else would choose. */
export async function testPorts() {
  const ports = {};
  for (const name of ['web', 'sms', 'mail', 'smtp', 'clock']) {
    do ports[name] = await randomFreePort();
    while (Object.entries(ports).some(([other, port]) => other !== name && port === ports[name]));
  }
  return ports;
}

/** The name under which other machines reach a server that listens everywhere. */
export function reachableHost(host, interfaces = networkInterfaces()) {
  if (host !== '0.0.0.0') return host;
  const outside = Object.values(interfaces)
    .flat()
    .find((one) => one.family === 'IPv4' && !one.internal);
  return outside?.address ?? '127.0.0.1';
}

/** The addresses that follow from the ports. */
export function addressesOf(ports, { host = '127.0.0.1', env = {}, fakes = true } = {}) {
  const web = (env.PUBLIC_URL || `http://${reachableHost(host)}:${ports.web}`).replace(/\/+$/, '');
  if (!fakes) return { web };
  return {
    web,
    sms: `http://127.0.0.1:${ports.sms}`,
    mail: `http://127.0.0.1:${ports.mail}`,
    smtp: `smtp://127.0.0.1:${ports.smtp}`,
    clock: `http://127.0.0.1:${ports.clock}`,
  };
}

/** Refuses to start without the fakes when the real services are not named. */
export function requireRealServices(env) {
  const missing = ['TWILIO_ACCOUNT_SID', 'TWILIO_AUTH_TOKEN', 'SMTP_URL', 'MAIL_FROM'].filter(
    (name) => !env[name],
  );
  if (missing.length === 0) return;
  throw new Failure(
    `--no-fakes sends real texts and mail, so it needs ${missing.join(', ')} in the environment.`,
  );
}

/** The variables of the server, the worker and the commands beside them (see server/env.ts). */
export function serverEnvironment({
  database,
  secrets,
  ports,
  addresses,
  host = '127.0.0.1',
  nodeEnv,
  env = {},
}) {
  const services = addresses.sms
    ? {
        TWILIO_API_BASE: addresses.sms,
        SMTP_URL: addresses.smtp,
        ...(addresses.clock && { CLOCK_URL: addresses.clock }),
      }
    : {};
  return {
    LOG_LEVEL: 'info',
    TRUSTED_HOPS: '0',
    MAIL_FROM: 'bell@example.com',
    ...env,
    ...secrets,
    ...services,
    NODE_ENV: nodeEnv,
    HOST: host,
    PORT: String(ports.web),
    PUBLIC_URL: addresses.web,
    DATABASE_URL: database.databaseUrl,
    DB_APP_ROLE: database.appRole,
    DB_OWNER_ROLE: database.ownerRole,
  };
}

/** The variables of the fakes. */
export function fakesEnvironment({ base, ports, addresses, folder = join(stateDir, 'fakes'), at }) {
  return {
    ...base,
    FAKE_SMS_PORT: String(ports.sms),
    FAKE_MAIL_HTTP_PORT: String(ports.mail),
    FAKE_MAIL_SMTP_PORT: String(ports.smtp),
    FAKE_CLOCK_PORT: String(ports.clock),
    FAKE_STATE_DIR: folder,
    FAKE_SMS_INBOUND_URL: `${addresses.web}/hooks/sms/inbound`,
    FAKE_START_ZONE: base.FAKE_START_ZONE || 'America/Denver',
    ...(at ? { FAKE_START_AT: at } : {}),
  };
}
