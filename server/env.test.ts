import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { EnvSchema, parseEnv } from './env';

const hex = 'a1'.repeat(32);
const RIGHT = {
  NODE_ENV: 'test',
  PUBLIC_URL: 'https://shop.example.com/',
  DATABASE_URL: 'postgres://login@127.0.0.1:5999/benchbell',
  DB_APP_ROLE: 'benchbell_app_x',
  DB_OWNER_ROLE: 'benchbell_owner_x',
  SESSION_SECRET: hex,
  LINK_KEY: hex,
  CODE_KEY: hex,
  TWILIO_ACCOUNT_SID: `AC${'0'.repeat(32)}`,
  TWILIO_AUTH_TOKEN: 'token-of-the-fake',
  SMTP_URL: 'smtp://127.0.0.1:1025',
};
const NEEDED = Object.keys(RIGHT).filter((name) => name !== 'NODE_ENV');

/** The names that the refusal speaks of. */
function refused(changes: Record<string, string | undefined>): string[] {
  try {
    parseEnv({ ...RIGHT, ...changes });
    return [];
  } catch (error) {
    return String(error)
      .split('\n')
      .slice(1)
      .map((line) => line.trim().split(':')[0] ?? '');
  }
}

describe('parseEnv', () => {
  it('takes what is right, and links have no slash too many', () => {
    expect(parseEnv(RIGHT)).toMatchObject({
      PUBLIC_URL: 'https://shop.example.com',
      PORT: 5180,
      TRUSTED_HOPS: 0,
    });
  });

  it('names everything that is missing, at once', () => {
    const nothing = Object.fromEntries(NEEDED.map((name) => [name, undefined]));
    expect(refused(nothing).sort()).toEqual([...NEEDED].sort());
  });

  it('counts what is blank as missing', () => {
    expect(() => parseEnv({ ...RIGHT, LINK_KEY: '' })).toThrow('LINK_KEY: is missing');
  });

  it.each([
    ['NODE_ENV', 'staging'],
    ['PORT', '70000'],
    ['PORT', 'http'],
    ['PUBLIC_URL', 'shop.example.com'],
    ['PUBLIC_URL', 'ftp://shop.example.com'],
    ['TRUSTED_HOPS', '-1'],
    ['DATABASE_URL', 'mysql://127.0.0.1/x'],
    ['DB_APP_ROLE', 'app"; drop role x; --'],
    ['SESSION_SECRET', 'secret'],
    ['LINK_KEY', 'a'.repeat(63)],
    ['CODE_KEY', 'g'.repeat(64)],
    ['TWILIO_ACCOUNT_SID', 'AC123'],
    ['TWILIO_AUTH_TOKEN', 'short'],
    ['TWILIO_API_BASE', 'nowhere'],
    ['SMTP_URL', 'http://127.0.0.1'],
    ['MAIL_FROM', 'nobody'],
    ['LOG_LEVEL', 'loud'],
  ])('refuses %s=%s and names it', (name, value) => {
    expect(refused({ [name]: value })).toEqual([name]);
  });

  it('names all that is wrong together, and none of the values, which may be secret', () => {
    const wrong = { CODE_KEY: 'hunter2', SMTP_URL: 'hunter2', PORT: 'hunter2' };
    expect(refused(wrong).sort()).toEqual(['CODE_KEY', 'PORT', 'SMTP_URL']);
    expect(() => parseEnv({ ...RIGHT, ...wrong })).not.toThrow('hunter2');
  });

  it('refuses a clock address in production, and with it everything else that is wrong', () => {
    const clock = { NODE_ENV: 'production', CLOCK_URL: 'http://127.0.0.1:5190' };
    expect(refused(clock)).toEqual(['CLOCK_URL']);
    expect(refused({ ...clock, SMTP_URL: 'x' }).sort()).toEqual(['CLOCK_URL', 'SMTP_URL']);
    expect(refused({ ...clock, NODE_ENV: 'test' })).toEqual([]);
  });

  it('is production unless it is said otherwise, so that nothing of development is there by accident', () => {
    expect(parseEnv({ ...RIGHT, NODE_ENV: undefined }).NODE_ENV).toBe('production');
    expect(refused({ NODE_ENV: undefined, CLOCK_URL: 'http://127.0.0.1:5190' })).toEqual(['CLOCK_URL']);
  });
});

it('is told whole in the README, one row a variable or a group of them', () => {
  const readme = readFileSync(new URL('../README.md', import.meta.url), 'utf8');
  const rows = readme.split('\n').filter((line) => line.startsWith('| `'));
  const told = rows.flatMap((row) =>
    [...(row.split('|')[1] ?? '').matchAll(/`([A-Z_]+)`/g)].map(([, name]) => name),
  );
  expect(told.sort()).toEqual(Object.keys(EnvSchema.shape).sort());
});
