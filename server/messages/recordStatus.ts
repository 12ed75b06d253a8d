/** A status report of the provider's. Inside a unit of work. */
import type { Ctx } from '#server/lib/context';
import { run } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { lockMessage } from './lockMessage';
import { applyDelivery, deliveryOf, settleAccepted } from './settle';

export interface StatusReport {
  /** Our message, from the address that the provider was given. */
  messageId: string;
  providerId: string;
  status: string;
  errorCode: string | null;
}

/**
 * Keeps a report once and takes it in. A report is also the proof that the provider took the text, so one that comes
 * before our own commit, or after a crash, settles the message.
 */
export async function recordStatus(ctx: Ctx, report: StatusReport): Promise<void> {
  const { messageId, providerId, status, errorCode } = report;
  const kept = await run(
    `insert into text_statuses (shop_id, id, provider_id, status, error_code, message_id, at)
     values ($1, $2, $3, $4, $5, $6, $7) on conflict (shop_id, provider_id, status) do nothing returning id`,
    [ctx.shopId, newId(), providerId, status, errorCode, messageId, ctx.now],
  );
  if (kept.length === 0) return;
  const message = await lockMessage(messageId);
  if (message?.channel !== 'text') return;
  await settleAccepted(ctx, message, providerId);
  const delivery = deliveryOf(status);
  if (delivery && message.providerId === providerId) await applyDelivery(ctx, message, delivery, errorCode);
}
