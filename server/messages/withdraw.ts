/** What an undo or a correction takes back before anybody hears of it. Inside a unit of work. */
import type { Ctx } from '#server/lib/context';
import { Message, Notice, Person } from '#server/models/index';
import { setRelease } from './noticeStore';
import { presentTold, standingNotices, type Told } from './told';

/**
 * Withdraws the notices of these events that have not gone. The message's row is locked by undo and by the worker's
 * claim alike, so one of the two comes first.
 */
export async function withdrawNotices(
  ctx: Ctx,
  eventIds: string | readonly string[],
): Promise<{ withdrawn: number; told: Told[] }> {
  const notices = await standingNotices(eventIds);
  const messages = await lockMessages(notices);
  const pending = messages.filter(({ status }) => status === 'pending');
  const ids = new Set(pending.map(({ id }) => id));
  const taken = notices.filter(({ messageId }) => ids.has(messageId));
  await Notice.update({ state: 'withdrawn' }, { where: { id: taken.map(({ id }) => id) } });
  for (const message of pending) await settleOrShift(ctx, message);
  return { withdrawn: taken.length, told: await presentTold(notices, messages) };
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
