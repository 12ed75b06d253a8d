import { audit } from '#server/lib/audit';
import type { Ctx } from '#server/lib/context';
import { rows } from '#server/lib/db';
import { NO_CODE } from '#server/lib/loginCodes';
import type { ShopProfile } from '#server/lib/shops';

const DAY_MS = 24 * 60 * 60_000;
const ALARM_SHARE = 0.8;
/** Of the last 50 codes sent, this many must have been used: pumped texts are never read. */
const SAMPLE = 50;
const USED_MIN = 15;
/** A code sent just now may still be on its way to the form. */
const STILL_TYPING_MS = 3 * 60_000;

export type CodeStop = 'budget' | 'conversion';

/**
 * Whether the shop may send one more code. Inside a unit of work; asks for one shop queue up here, so that the count
 * is exact. Alarms and stops are recorded once in 24 hours, and a stop ends as the codes that caused it get older
 * than that.
 */
export async function codeStop(ctx: Ctx, shop: ShopProfile): Promise<CodeStop | null> {
  await rows("select pg_advisory_xact_lock(hashtextextended('codes ' || $1, 0))", [shop.id]);
  const sent = await sentToday(ctx);
  const limit = shop.settings.codesPerDay;
  if (sent >= limit) return stopped(ctx, 'budget', { sent, limit });
  if (await isPumped(ctx)) return stopped(ctx, 'conversion', { sent });
  if (sent + 1 >= limit * ALARM_SHARE) await auditOnce(ctx, 'codes_near_budget', { sent: sent + 1, limit });
  return null;
}

async function sentToday(ctx: Ctx): Promise<number> {
  const [row] = await rows<{ n: number }>(
    'select count(*)::int as n from login_codes where code_hmac <> $1 and created_at > $2',
    [NO_CODE, since(ctx)],
  );
  return row?.n ?? 0;
}

async function isPumped(ctx: Ctx): Promise<boolean> {
  const [row] = await rows<{ n: number; used: number }>(
    `select count(*)::int as n, count(used_at)::int as used from (
       select used_at from login_codes
        where code_hmac <> $1 and created_at > $2 and (used_at is not null or created_at <= $3)
        order by created_at desc limit ${SAMPLE}) as last`,
    [NO_CODE, since(ctx), new Date(ctx.now.getTime() - STILL_TYPING_MS)],
  );
  return row?.n === SAMPLE && row.used < USED_MIN;
}

async function stopped(ctx: Ctx, reason: CodeStop, facts: Record<string, unknown>): Promise<CodeStop> {
  await auditOnce(ctx, 'codes_stopped', { reason, ...facts });
  return reason;
}

async function auditOnce(ctx: Ctx, kind: string, details: Record<string, unknown>): Promise<void> {
  const known = await rows('select 1 from audit_events where kind = $1 and at > $2 limit 1', [
    kind,
    since(ctx),
  ]);
  if (known.length > 0) return;
  ctx.log.warn({ shopId: ctx.shopId, kind, details }, 'one-time codes');
  await audit(ctx, kind, { details });
}

const since = (ctx: Ctx): Date => new Date(ctx.now.getTime() - DAY_MS);
