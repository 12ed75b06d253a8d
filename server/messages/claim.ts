/**
 * Taking a message in hand: what a task does with the row it was pointed at, decided on the locked row in one unit of
 * work. Nothing is sent here.
 */
import type { Ctx } from '#server/lib/context';
import { newId } from '#server/lib/ids';
import { CODE_LIFE_MS } from '#server/lib/loginCodes';
import type { Message } from '#server/models/index';
import { numberToText } from '#server/queries/senderNumber';
import { isWorkerAlive } from './liveWorkers';
import { lockMessage } from './lockMessage';
import { makeReady } from './makeReady';
import { outgoingOf, type Outgoing } from './outgoing';
import { settleFailed } from './settle';

/** Longer than any request takes: by then a row that still says "sending" was left behind. */
const LEASE_MS = 45_000;
/** A text of which nobody knows whether it went is looked for when this much has passed since its try. */
export const LOOK_AFTER_MS = 15_000;
const LOOK_LEASE_MS = 30_000;
/** Nobody could say for this long: it is given up, visibly. */
const GIVE_UP_MS = 4 * 60 * 60_000;
const PUT_OFF_MS = 60_000;

/** What the task does next; null: nothing, the world has moved on or the time has not come. */
export type Claim =
  { act: 'send'; message: Message; outgoing: Outgoing } | { act: 'look'; message: Message } | null;

/** Claims a message for this worker. Inside a unit of work; who holds the claim acts after it has committed. */
export async function claimMessage(ctx: Ctx, messageId: string, workerId: string): Promise<Claim> {
  const message = await lockMessage(messageId);
  if (!message) return null;
  if (message.status === 'sending') await takeFromTheDead(ctx, message);
  if (message.notBefore > ctx.now) return null;
  if (message.status === 'unknown') return claimLook(ctx, message);
  if (message.status === 'pending') return claimSend(ctx, message, workerId);
  return null;
}

/** A claim outlives its worker: then the text may have gone, and is looked for. */
async function takeFromTheDead(ctx: Ctx, message: Message): Promise<void> {
  const isLeft = message.notBefore <= ctx.now || !(await isWorkerAlive(message.claimedBy));
  if (isLeft) await setUnknown(ctx, message);
}

/**
 * Nobody knows whether the provider took it. A text is looked for; an e-mail cannot be, and goes again under the same
 * Message-ID.
 */
export async function setUnknown(ctx: Ctx, message: Message): Promise<void> {
  const tried = message.claimedAt ?? ctx.now;
  const lookAt = new Date(Math.max(ctx.now.getTime(), tried.getTime() + LOOK_AFTER_MS));
  if (message.channel === 'email') {
    await message.update({ status: 'pending', notBefore: ctx.now, queuedAt: null });
  } else await message.update({ status: 'unknown', lookAfter: lookAt, notBefore: lookAt, queuedAt: null });
}

async function claimLook(ctx: Ctx, message: Message): Promise<Claim> {
  if (await giveUp(ctx, message)) return null;
  await message.update({
    claim: newId(),
    notBefore: new Date(ctx.now.getTime() + LOOK_LEASE_MS),
    queuedAt: null,
  });
  return { act: 'look', message };
}

async function claimSend(ctx: Ctx, message: Message, workerId: string): Promise<Claim> {
  if (await giveUp(ctx, message)) return null;
  if (!(await makeReady(ctx, message))) return null;
  const from = message.channel === 'text' ? await numberToText(ctx.shopId) : '';
  if (from === null) {
    await settleFailed(ctx, message, 'no_sender', null);
    return null;
  }
  await message.update({
    status: 'sending',
    attempt: message.attempt + 1,
    claim: newId(),
    claimedAt: ctx.now,
    claimedBy: workerId,
    firstClaimedAt: message.firstClaimedAt ?? ctx.now,
    notBefore: new Date(ctx.now.getTime() + LEASE_MS),
    queuedAt: null,
  });
  return { act: 'send', message, outgoing: await outgoingOf(ctx, message, from) };
}

/**
 * After a failure of our own: tried again in a while, shown on the job, and given up like any other. Inside a unit of
 * work.
 */
export async function putOff(ctx: Ctx, messageId: string): Promise<void> {
  const message = await lockMessage(messageId);
  if (message?.status !== 'pending' || message.notBefore > ctx.now) return;
  await message.update({
    problem: 'not_made',
    firstClaimedAt: message.firstClaimedAt ?? ctx.now,
    notBefore: new Date(ctx.now.getTime() + PUT_OFF_MS),
    queuedAt: null,
  });
}

/** A stale text is worse than none, and so is a code that has ended. */
async function giveUp(ctx: Ctx, message: Message): Promise<boolean> {
  const { kind, createdAt, firstClaimedAt } = message;
  const isEnded = kind === 'code' && ctx.now.getTime() - createdAt.getTime() >= CODE_LIFE_MS;
  const isStale = firstClaimedAt !== null && ctx.now.getTime() - firstClaimedAt.getTime() >= GIVE_UP_MS;
  if (!isEnded && !isStale) return false;
  await settleFailed(ctx, message, isEnded ? 'expired' : 'gave_up', null);
  return true;
}
