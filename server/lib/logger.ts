import pino, { type Logger } from 'pino';
import type { Env } from '#server/env';

/** Addresses that are secrets: stub, password and unsubscribe links. */
const SECRET_PATHS = /(\/(?:t|u|password-links|password)\/)[\w-]{10,}/gi;

/** A path or address as it may be logged. */
export function maskSecrets(address: string): string {
  return address.replace(SECRET_PATHS, '$1…');
}

/** Of an error, what helps to find its cause. */
const TELLING = ['code', 'constraint', 'table', 'status', 'cause', 'original'] as const;

/**
 * An error as it is logged: not with the values that its statement was given, for among them are codes, phones and
 * words that customers typed.
 */
function bareError(error: unknown): unknown {
  if (!(error instanceof Error)) return error;
  const facts = error as Partial<Record<(typeof TELLING)[number], unknown>>;
  const told = TELLING.filter((key) => facts[key] !== undefined).map((key) => [key, bareError(facts[key])]);
  return { type: error.name, message: error.message, stack: error.stack, ...Object.fromEntries(told) };
}

/** How each fact that may hold an error is logged. */
export const serializers = {
  err: bareError,
  queue: bareError,
  facts: (facts: unknown) => (Array.isArray(facts) ? facts.map(bareError) : facts),
};

/** The process's logger: one JSON line an event, secrets left out. */
export function createLogger(env: Pick<Env, 'LOG_LEVEL'>, name: string): Logger {
  return pino({
    name,
    level: env.LOG_LEVEL,
    serializers,
    redact: ['password', 'code', 'token', '*.password', '*.code', '*.token'],
  });
}
