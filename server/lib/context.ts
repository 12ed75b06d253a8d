import type { Logger } from 'pino';
import type { Clock } from './clock';
import type { Env } from '#server/env';
import type { Actor } from '#shared/domain/roles';

/** What every part of a process is given. */
export interface Services {
  env: Env;
  clock: Clock;
  log: Logger;
}

/** What a command is given: who acts, for which shop, from where, and when the act began. */
export interface Ctx extends Services {
  shopId: string;
  actor: Actor | null;
  ip: string;
  now: Date;
}
