import { AppError } from '#server/errors';
import type { Ctx } from '#server/lib/context';
import { run, withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { CODE_LIFE_MS, codeHmac, drawDigits, NO_CODE } from '#server/lib/loginCodes';
import { limitCodes } from '#server/lib/rateLimits';
import type { ShopProfile } from '#server/lib/shops';
import { takeAtLeast } from '#server/lib/steady';
import { isOptedOut } from '#server/messages/optOut';
import { sendCodeText } from '#server/messages/sendCode';
import { LoginCode } from '#server/models/index';
import { numberToText } from '#server/queries/senderNumber';
import { peopleOfPhone } from '#server/queries/people';
import { codeStop } from './codeBudget';
import type { AskCodeAnswer, AskCodeBody, OptedOutDetails } from '#shared/schemas/session';

/** Writing a text takes a few milliseconds more than writing none; both answers wait this long. */
const STEADY_MS = 60;
const STOPPED_FOR_SECONDS = 60 * 60;

/**
 * Sends a code to a phone. To sign in, a phone that the shop does not know gets none, and the answer is the same.
 * @throws AppError too_many, opted_out
 */
export async function askCode(ctx: Ctx, shop: ShopProfile, body: AskCodeBody): Promise<AskCodeAnswer> {
  await limitCodes(ctx, body.phone);
  const answer = await takeAtLeast(STEADY_MS, () => withShop(shop.id, () => decide(ctx, shop, body)));
  if (answer === 'stopped') throw new AppError('too_many', { retryAfter: STOPPED_FOR_SECONDS });
  return answer;
}

// A stop is returned, not thrown: its record must outlive the unit of work.
async function decide(ctx: Ctx, shop: ShopProfile, body: AskCodeBody): Promise<AskCodeAnswer | 'stopped'> {
  await refuseOptedOut(shop, body.phone);
  if (await codeStop(ctx, shop)) return 'stopped';
  const people = await peopleOfPhone(body.phone);
  const isSent = body.purpose === 'book' || people.length > 0;
  const requestId = newId();
  const code = drawDigits();
  await endOlderCodes(ctx, body.phone);
  const kept = isSent ? codeHmac(ctx.env.CODE_KEY, requestId, code) : NO_CODE;
  const expiresAt = await keep(ctx, body, { requestId, kept });
  if (isSent) {
    const { phone, language, purpose } = body;
    const personId = people.length === 1 ? (people[0]?.id ?? null) : null;
    await sendCodeText(ctx, {
      phone,
      language,
      code,
      personId,
      shopTextName: shop.settings.textName,
      purpose,
    });
  }
  return { requestId, expiresAt: expiresAt.toISOString() };
}

async function refuseOptedOut(shop: ShopProfile, phone: string): Promise<void> {
  if (!(await isOptedOut(phone))) return;
  const details: OptedOutDetails = {
    shopPhone: shop.settings.phone,
    shopNumberToText: await numberToText(shop.id),
  };
  throw new AppError('opted_out', { details });
}

/** A new code kills the old ones. */
async function endOlderCodes(ctx: Ctx, phone: string): Promise<void> {
  await run(
    'update login_codes set expires_at = $2 where phone = $1 and used_at is null and expires_at > $2 returning id',
    [phone, ctx.now],
  );
}

async function keep(
  ctx: Ctx,
  body: AskCodeBody,
  { requestId, kept }: { requestId: string; kept: string },
): Promise<Date> {
  const { phone, purpose, language, consent } = body;
  const expiresAt = new Date(ctx.now.getTime() + CODE_LIFE_MS);
  await LoginCode.create({
    shopId: ctx.shopId,
    id: requestId,
    phone,
    purpose,
    language,
    consent,
    codeHmac: kept,
    ip: ctx.ip,
    createdAt: ctx.now,
    expiresAt,
  });
  return expiresAt;
}
