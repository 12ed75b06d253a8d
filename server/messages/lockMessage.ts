import { Message } from '#server/models/index';
import { lockVisitMessages } from './noticeStore';

/**
 * Locks a message for a change. The visit's lock comes first, always, so that nobody waits crosswise. Inside a unit
 * of work.
 */
export async function lockMessage(id: string): Promise<Message | null> {
  const found = await Message.findByPk(id, { attributes: ['visitId'] });
  if (!found) return null;
  if (found.visitId) await lockVisitMessages(found.visitId);
  return Message.findByPk(id, { lock: true });
}
