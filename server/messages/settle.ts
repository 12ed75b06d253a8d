/**
 * What became of a message. Whoever learns of it first settles it: the task that sent it, the look-up, or the
 * provider's callback, which may come before our own commit. Once accepted, nothing sets it back.
 */
import type { Ctx } from '#server/lib/context';
import { rows } from '#server/lib/db';
import type { Message } from '#server/models/index';
import type { Delivery } from '#server/models/Message';
import { fallBackToEmail } from './fallback';
import { stopTextsTo } from './optOut';
import type { Problem } from './problems';

/** How far a text has come; a later report never says less. */
const DELIVERY_RANK: Record<Delivery, number> = {
  queued: 0,
  sending: 1,
  sent: 2,
  delivered: 3,
  undelivered: 3,
  failed: 3,
};

/** What the provider's word for a status means to us; null for words that say nothing about arriving. */
export function deliveryOf(status: string): Delivery | null {
  if (status in DELIVERY_RANK) return status as Delivery;
  if (status === 'read') return 'delivered';
  if (status === 'canceled') return 'failed';
  return null;
}

/** The provider took it. Inside a unit of work, on the locked row. */
export async function settleAccepted(ctx: Ctx, message: Message, providerId: string): Promise<void> {
  if (message.providerId) {
    if (message.providerId !== providerId) {
      ctx.log.error({ messageId: message.id, providerId }, 'a message was accepted twice');
    }
    return;
  }
  await message.update({
    status: 'accepted',
    providerId,
    delivery: message.channel === 'text' ? 'queued' : null,
    problem: null,
    errorCode: null,
    settledAt: ctx.now,
    queuedAt: null,
    ...blankCode(message),
  });
  if (message.channel === 'text') await applyKnownStatuses(ctx, message);
}

/** The numbers by which the provider says that a phone wants or can take no texts. */
const OPTED_OUT = '21610';
const BAD_NUMBER = ['21211', '21614'];

/** It will not arrive: said on the job, and told by e-mail. Inside a unit of work, on the locked row. */
export async function settleFailed(
  ctx: Ctx,
  message: Message,
  problem: Problem,
  errorCode: string | null,
): Promise<void> {
  await message.update({
    status: 'failed',
    problem: errorCode && message.channel === 'text' ? problemOfCode(errorCode, problem) : problem,
    errorCode,
    settledAt: ctx.now,
    queuedAt: null,
    ...blankCode(message),
  });
  await afterFailure(ctx, message, errorCode);
}

/** Takes in one report about an accepted text. Inside a unit of work, on the locked row. */
export async function applyDelivery(
  ctx: Ctx,
  message: Message,
  delivery: Delivery,
  errorCode: string | null,
): Promise<void> {
  const before: Delivery | null = message.delivery;
  const known = before ? DELIVERY_RANK[before] : -1;
  if (DELIVERY_RANK[delivery] <= known) return;
  const isLost = delivery === 'undelivered' || delivery === 'failed';
  const problem = isLost ? problemOfCode(errorCode ?? '', 'not_delivered') : null;
  await message.update({ delivery, errorCode: isLost ? errorCode : null, problem });
  if (isLost) await afterFailure(ctx, message, errorCode);
}

function problemOfCode(code: string, otherwise: Problem): Problem {
  if (code === OPTED_OUT) return 'opted_out';
  return BAD_NUMBER.includes(code) ? 'bad_number' : otherwise;
}

async function afterFailure(ctx: Ctx, message: Message, errorCode: string | null): Promise<void> {
  if (message.channel !== 'text') return;
  if (errorCode === OPTED_OUT) {
    await stopTextsTo(ctx, message.toAddress, 'carrier', `provider answered ${OPTED_OUT}`);
  }
  if (message.kind === 'notices') await fallBackToEmail(ctx, message);
}

/** Reports that came before the message was known to be accepted. */
async function applyKnownStatuses(ctx: Ctx, message: Message): Promise<void> {
  const known = await rows<{ status: string; errorCode: string | null }>(
    'select status, error_code as "errorCode" from text_statuses where provider_id = $1 order by at',
    [message.providerId],
  );
  for (const { status, errorCode } of known) {
    const delivery = deliveryOf(status);
    if (delivery) await applyDelivery(ctx, message, delivery, errorCode);
  }
}

function blankCode({ kind }: Message): { body: null } | Record<string, never> {
  return kind === 'code' ? { body: null } : {};
}
