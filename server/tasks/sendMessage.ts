/**
 * The task that sends. It looks at the row again, claims it, acts outside of any unit of work, and writes down what
 * came of it. A crash at any point leaves a row from which the next worker knows what may have happened.
 */
import type { Ctx, Services } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import type { MailGateway } from '#server/lib/mail';
import type { TaskPayloads } from '#server/lib/queue';
import type { SendResult, SmsGateway } from '#server/lib/sms';
import { claimMessage, putOff, setUnknown, type Claim } from '#server/messages/claim';
import { lockMessage } from '#server/messages/lockMessage';
import type { Outgoing } from '#server/messages/outgoing';
import { settleAccepted, settleFailed } from '#server/messages/settle';
import { taskCtx } from '#server/messages/taskCtx';
import { Message } from '#server/models/index';
import { lookForText, type LookUp } from './lookForText';

export interface Senders {
  sms: SmsGateway;
  mail: MailGateway;
  lookUp: LookUp;
}

/** A claim older than this is checked again before anything goes out: the process may have slept. */
const FRESH_MS = 1_000;
const BACK_OFF_FIRST_MS = 2_000;
const BACK_OFF_MOST_MS = 60_000;

/** Sends one message, or looks for one that may have been sent. */
export async function sendMessage(
  services: Services,
  senders: Senders,
  workerId: string,
  { shopId, messageId }: TaskPayloads['send_message'],
): Promise<void> {
  const start = performance.now();
  const claimed = await take(services, shopId, messageId, workerId);
  if (!claimed) return;
  if (claimed.act === 'look') return lookForText(services, senders.lookUp, claimed.message);
  if (performance.now() - start > FRESH_MS && !(await isStillOurs(claimed.message))) return;
  const result = await send(senders, claimed.outgoing);
  await withShop(shopId, () => record(taskCtx(services, shopId), claimed.message, result));
}

/** A failure to make a message ready is ours, not the message's: it waits, and the task fails for all to see. */
async function take(services: Services, shopId: string, messageId: string, workerId: string): Promise<Claim> {
  try {
    return await withShop(shopId, () => claimMessage(taskCtx(services, shopId), messageId, workerId));
  } catch (error) {
    await withShop(shopId, () => putOff(taskCtx(services, shopId), messageId));
    throw error;
  }
}

function isStillOurs({ id, shopId, claim }: Message): Promise<boolean> {
  return withShop(shopId, async () => (await Message.findByPk(id))?.claim === claim);
}

function send({ sms, mail }: Senders, outgoing: Outgoing): Promise<SendResult> {
  return outgoing.channel === 'text' ? sms.send(outgoing.text) : mail.send(outgoing.mail);
}

/** An acceptance counts whoever holds the claim by now; everything else only while the claim is ours. */
async function record(ctx: Ctx, { id, claim }: Message, result: SendResult): Promise<void> {
  const message = await lockMessage(id);
  if (!message) return;
  if (result.kind === 'accepted') return settleAccepted(ctx, message, result.providerId);
  if (message.claim !== claim || message.status !== 'sending') return;
  if (result.kind === 'unknown') return setUnknown(ctx, message);
  if (result.kind === 'refused') {
    return settleFailed(ctx, message, message.channel === 'text' ? 'refused' : 'mail_refused', result.code);
  }
  await backOff(ctx, message);
  ctx.log.warn({ messageId: id, reason: result.reason }, 'not taken, will be tried again');
}

/**
 * Nothing was taken, so it is simply tried again, and as nobody has seen the words they may be made anew: unless an
 * earlier try is one of which nobody knows.
 */
async function backOff(ctx: Ctx, message: Message): Promise<void> {
  const wait = Math.min(BACK_OFF_FIRST_MS * 2 ** (message.attempt - 1), BACK_OFF_MOST_MS);
  const mayReword = message.kind === 'notices' && message.channel === 'text' && message.lookAfter === null;
  await message.update({
    status: 'pending',
    notBefore: new Date(ctx.now.getTime() + wait),
    queuedAt: null,
    ...(mayReword ? { body: null } : {}),
  });
}
