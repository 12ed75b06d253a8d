/**
 * The provider takes no key by which a second request would be known as the first, so after a time-out, an error of
 * theirs or a crash of ours it is asked which texts it took. Only when one is missing twice is it sent again.
 */
import type { Ctx, Services } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import type { SentText } from '#server/lib/sms';
import { LOOK_AFTER_MS } from '#server/messages/claim';
import { lockMessage } from '#server/messages/lockMessage';
import { settleAccepted } from '#server/messages/settle';
import { taskCtx } from '#server/messages/taskCtx';
import { Message } from '#server/models/index';

/** Asks which texts were taken for a phone. A part of its own, so that a harness can show what happens without it. */
export type LookUp = (to: string) => Promise<SentText[]>;

/** Their clock and ours need not agree, and theirs counts whole seconds. */
const CLOCKS_APART_MS = 60_000;
const LOOKS_NEEDED = 2;

/** Looks for a text that may have gone, and settles it or lets it go again. */
export async function lookForText(services: Services, lookUp: LookUp, message: Message): Promise<void> {
  const found = await lookUp(message.toAddress);
  await withShop(message.shopId, () => record(taskCtx(services, message.shopId), message, found));
}

async function record(ctx: Ctx, looked: Message, found: SentText[]): Promise<void> {
  const message = await lockMessage(looked.id);
  // A callback may have settled it while we looked; another worker may look by now.
  if (message?.status !== 'unknown' || message.claim !== looked.claim) return;
  const ours = await findOurs(message, found);
  if (ours) return settleAccepted(ctx, message, ours.providerId);
  const looks = message.looksWithoutFind + 1;
  if (looks >= LOOKS_NEEDED) {
    await message.update({ status: 'pending', notBefore: ctx.now, looksWithoutFind: 0, queuedAt: null });
    return;
  }
  const next = new Date(ctx.now.getTime() + LOOK_AFTER_MS);
  await message.update({ looksWithoutFind: looks, notBefore: next, queuedAt: null });
}

/** Equal words, not older than the first try, and not known as another message of ours. */
async function findOurs(message: Message, found: SentText[]): Promise<SentText | undefined> {
  const since = (message.firstClaimedAt ?? message.createdAt).getTime() - CLOCKS_APART_MS;
  const equal = found.filter(({ body, createdAt }) => body === message.body && createdAt.getTime() >= since);
  const known = await Message.findAll({ where: { providerId: equal.map(({ providerId }) => providerId) } });
  const taken = new Set(known.map(({ providerId }) => providerId));
  return equal.find(({ providerId }) => !taken.has(providerId));
}
