/**
 * Limits on what can be guessed or costs money, counted in PostgreSQL so that all processes count together. Each
 * delays and none locks: where an account is one part of a key, the other is the place the tries come from, so that
 * an attacker elsewhere never keeps the real owner out. They count real time, which no clock setting moves.
 */
import { createHash } from 'node:crypto';
import { isIPv6 } from 'node:net';
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible';
import type { Sequelize } from 'sequelize';
import { AppError } from '#server/errors';
import { normalizeCode } from '#shared/domain/tagCode';
import type { Ctx } from './context';
import { db, refuseInUnit } from './db';

const MINUTE = 60;
const HOUR = 60 * MINUTE;
const DAY = 24 * HOUR;

/** Points and seconds of each limit. */
export const LIMITS = {
  /** Sign-in by password: tries for one account from one network. */
  signInAccount: { points: 5, duration: 15 * MINUTE },
  /** Sign-in by password: tries from one address, whatever the account. */
  signInAddress: { points: 50, duration: HOUR },
  codePhoneSoon: { points: 3, duration: 10 * MINUTE },
  codePhoneDay: { points: 6, duration: DAY },
  codeAddress: { points: 10, duration: HOUR },
  /** All numbers that differ in the last four digits alone: pumped numbers come in such blocks. */
  codePrefix: { points: 20, duration: HOUR },
  /** Stub look-ups from one address. */
  stubAddress: { points: 20, duration: 10 * MINUTE },
  /** Stub look-ups of one code, from wherever: four digits are soon guessed. */
  stubCode: { points: 10, duration: HOUR },
  reportAddress: { points: 60, duration: HOUR },
} as const;
type LimitName = keyof typeof LIMITS;

/** One use of a limit: which, and by whom or for what. */
interface LimitUse {
  limit: LimitName;
  key: string;
}

type Limiters = Record<LimitName, RateLimiterPostgres>;
const limitersOf = new WeakMap<Sequelize, Limiters>();

function limiters(): Limiters {
  const storeClient = db();
  const found = limitersOf.get(storeClient);
  if (found) return found;
  const made = Object.fromEntries(
    Object.entries(LIMITS).map(([keyPrefix, { points, duration }]) => [
      keyPrefix,
      new RateLimiterPostgres({
        storeClient,
        storeType: 'sequelize',
        tableName: 'rate_limits',
        tableCreated: true,
        keyPrefix,
        points,
        duration,
      }),
    ]),
  ) as Limiters;
  limitersOf.set(storeClient, made);
  return made;
}

/** Keys are hashed: the table shows neither addresses nor phones. */
const hashed = (key: string): string => createHash('sha256').update(key).digest('base64url');

async function consume(...uses: LimitUse[]): Promise<void> {
  // The end of a unit of work must not take a count back.
  refuseInUnit('a rate limit');
  for (const { limit, key } of uses) {
    try {
      await limiters()[limit].consume(hashed(key));
    } catch (refusal) {
      if (!(refusal instanceof RateLimiterRes)) throw refusal;
      throw new AppError('too_many', { retryAfter: Math.max(1, Math.ceil(refusal.msBeforeNext / 1000)) });
    }
  }
}

type Where = Pick<Ctx, 'ip' | 'shopId'>;

/** An address of the older protocol as the newer one writes it. */
const MAPPED = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i;

const accountKey = ({ ip, shopId }: Where, email: string): string => `${shopId} ${email} ${networkOf(ip)}`;

/**
 * Counts a try to sign in by password, right or wrong: tries under way together count too.
 * @throws AppError too_many with the seconds to wait
 */
export function limitSignIn(where: Where, email: string): Promise<void> {
  return consume(
    { limit: 'signInAddress', key: addressOf(where.ip) },
    { limit: 'signInAccount', key: accountKey(where, email) },
  );
}

/** Takes back what a right password was counted for. */
export async function forgiveSignIn(where: Where, email: string): Promise<void> {
  await limiters().signInAccount.delete(hashed(accountKey(where, email)));
  await limiters().signInAddress.reward(hashed(addressOf(where.ip)));
}

/**
 * Counts a code asked for, whether or not one is sent.
 * @throws AppError too_many with the seconds to wait
 */
export function limitCodes({ ip }: Where, phone: string): Promise<void> {
  return consume(
    { limit: 'codeAddress', key: addressOf(ip) },
    { limit: 'codePhoneSoon', key: phone },
    { limit: 'codePhoneDay', key: phone },
    { limit: 'codePrefix', key: phone.slice(0, -4) },
  );
}

/**
 * Counts a look-up of a stub by its printed code.
 * @throws AppError too_many with the seconds to wait
 */
export function limitStubLookups({ ip }: Pick<Ctx, 'ip'>, shopId: string, code: string): Promise<void> {
  return consume(
    { limit: 'stubAddress', key: addressOf(ip) },
    { limit: 'stubCode', key: `${shopId} ${normalizeCode(code)}` },
  );
}

/**
 * Counts a report of a browser.
 * @throws AppError too_many
 */
export function limitReports({ ip }: Pick<Ctx, 'ip'>): Promise<void> {
  return consume({ limit: 'reportAddress', key: addressOf(ip) });
}

/**
 * What counts as one address: of the newer protocol a household gets 2^64 and more, so there it is the whole /64.
 */
export function addressOf(ip: string): string {
  return isIPv6(ip) && !MAPPED.test(ip) ? networkOf(ip) : ip.replace(MAPPED, '$1');
}

/** The network of an address: its /24, or /64 in the newer protocol. */
export function networkOf(ip: string): string {
  const mapped = MAPPED.exec(ip);
  if (mapped?.[1]) return networkOf(mapped[1]);
  if (!isIPv6(ip)) return ip.split('.').slice(0, 3).join('.');
  return expandIPv6(ip).slice(0, 4).join(':');
}

function expandIPv6(ip: string): string[] {
  const [head = '', tail] = ip.split('::');
  const left = head === '' ? [] : head.split(':');
  if (tail === undefined) return left;
  const right = tail === '' ? [] : tail.split(':');
  return [...left, ...Array<string>(8 - left.length - right.length).fill('0'), ...right];
}
