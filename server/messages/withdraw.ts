/** What an undo or a correction takes back, and who has heard already. Inside a unit of work. */
import type { Ctx } from '#server/lib/context';
import { Message, Notice, Person } from '#server/models/index';
import { setRelease } from './noticeStore';
import type { Channel } from './recipients';

export interface Told {
  personId: string;
  name: string;
  channel: Channel;
  at: Date;
}

/**
 * Withdraws the notices of these events that have not gone. The message's row is locked by undo and by the worker's
 * claim alike, so one of the two comes first.
 */
export async function withdrawNotices(
  ctx: Ctx,
  eventIds: string | readonly string[],
): Promise<{ withdrawn: number; told: Told[] }> {
  const notices = await standingOf(eventIds);
  const messages = await lockMessages(notices);
  const pending = messages.filter(({ status }) => status === 'pending');
  const ids = new Set(pending.map(({ id }) => id));
  const taken = notices.filter(({ messageId }) => ids.has(messageId));
  await Notice.update({ state: 'withdrawn' }, { where: { id: taken.map(({ id }) => id) } });
  for (const message of pending) await settleOrShift(ctx, message);
  return { withdrawn: taken.length, told: await presentTold(notices, messages) };
}

/** Who has heard of these events, by which way and when. */
export async function toldOf(eventIds: readonly string[]): Promise<Told[]> {
  const notices = await standingOf(eventIds);
  const messages = await Message.findAll({ where: { id: notices.map(({ messageId }) => messageId) } });
  return presentTold(notices, messages);
}

function standingOf(eventIds: string | readonly string[]): Promise<Notice[]> {
  return Notice.findAll({ where: { eventId: [eventIds].flat(), state: 'standing' } });
}

function lockMessages(notices: readonly Notice[]): Promise<Message[]> {
  const ids = notices.map(({ messageId }) => messageId);
  return Message.findAll({ where: { id: [...new Set(ids)] }, order: ['id'], lock: true });
}

/** A message that carries nothing any more ends; one that still does may go earlier. */
async function settleOrShift(ctx: Ctx, message: Message): Promise<void> {
  const left = await Notice.count({ where: { messageId: message.id, state: 'standing' } });
  if (left === 0) {
    await message.update({ status: 'withdrawn', settledAt: ctx.now });
    return;
  }
  const person = message.personId ? await Person.findByPk(message.personId) : null;
  if (person) await setRelease(ctx, message, person);
}

/** A message that is on its way counts as heard; one that is known not to have arrived does not. */
async function presentTold(notices: readonly Notice[], messages: readonly Message[]): Promise<Told[]> {
  const byId = new Map(messages.map((message) => [message.id, message]));
  const people = await Person.findAll({ where: { id: notices.map(({ personId }) => personId) } });
  const nameOf = new Map(people.map(({ id, name }) => [id, name]));
  return notices.flatMap(({ messageId, personId, channel }) => {
    const message = byId.get(messageId);
    if (!message || !hasGone(message)) return [];
    const at = message.settledAt ?? message.claimedAt ?? message.createdAt;
    return [{ personId, name: nameOf.get(personId) ?? '', channel, at }];
  });
}

function hasGone({ status, delivery }: Message): boolean {
  if (status === 'sending' || status === 'unknown') return true;
  return status === 'accepted' && delivery !== 'undelivered' && delivery !== 'failed';
}
