import { expect, test } from 'vitest';
import { addressesOf, reachableHost, requireRealServices, serverEnvironment } from './environment.mjs';
import { completeSecrets } from './secrets.mjs';

const ports = { web: 5180, sms: 5181, mail: 5182, smtp: 20001, clock: 20002 };
const database = { databaseUrl: 'postgres://x', appRole: 'a', ownerRole: 'o' };

test('with the fakes, nothing of the environment can send a text or a mail to anybody real', () => {
  const env = { TWILIO_API_BASE: 'https://real.example.com', SMTP_URL: 'smtp://real.example.com:25' };
  const addresses = addressesOf(ports);
  const made = serverEnvironment({ database, secrets: {}, ports, addresses, nodeEnv: 'development', env });
  expect(made).toMatchObject({
    TWILIO_API_BASE: 'http://127.0.0.1:5181',
    SMTP_URL: 'smtp://127.0.0.1:20001',
  });
});

test('without the fakes there is no fake clock, and what is missing is named', () => {
  expect(addressesOf(ports, { fakes: false })).toEqual({ web: 'http://127.0.0.1:5180' });
  expect(() => requireRealServices({ SMTP_URL: 'smtp://mail.example.com' })).toThrow(
    /TWILIO_ACCOUNT_SID, TWILIO_AUTH_TOKEN, MAIL_FROM/,
  );
});

test('a server that listens everywhere is reached by the machine’s address', () => {
  const interfaces = {
    lo: [{ family: 'IPv4', internal: true, address: '127.0.0.1' }],
    eth0: [
      { family: 'IPv6', internal: false, address: 'fe80::1' },
      { family: 'IPv4', internal: false, address: '192.0.2.7' },
    ],
  };
  expect(reachableHost('0.0.0.0', interfaces)).toBe('192.0.2.7');
  expect(reachableHost('127.0.0.1', interfaces)).toBe('127.0.0.1');
});

test('a link base loses its trailing slash', () => {
  expect(addressesOf(ports, { env: { PUBLIC_URL: 'https://bench.example.com/' } }).web).toBe(
    'https://bench.example.com',
  );
});

test('secrets are long, differ, and are kept once made', () => {
  const made = completeSecrets({});
  expect(made.SESSION_SECRET).toMatch(/^[0-9a-f]{64}$/);
  expect(made.TWILIO_ACCOUNT_SID).toMatch(/^AC[0-9a-f]{32}$/);
  expect(new Set(Object.values(made)).size).toBe(5);
  expect(completeSecrets({ LINK_KEY: made.LINK_KEY }).LINK_KEY).toBe(made.LINK_KEY);
});
