import pino, { type Logger } from 'pino';
import type { Env } from '#server/env';

/** Addresses that are secrets: stub, password and unsubscribe links. */
const SECRET_PATHS = /(\/(?:t|u|password-links|password)\/)[\w-]{10,}/g;

/** A path or address as it may be logged. */
export function maskSecrets(address: string): string {
  return address.replace(SECRET_PATHS, '$1…');
}

/** The process's logger: one JSON line an event, secrets left out. */
export function createLogger(env: Pick<Env, 'LOG_LEVEL'>, name: string): Logger {
  return pino({
    name,
    level: env.LOG_LEVEL,
    redact: ['password', 'code', 'token', '*.password', '*.code', '*.token'],
  });
}
