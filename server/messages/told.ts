/** Who has heard of an event already. Inside a unit of work. */
import { Message, Notice, Person } from '#server/models/index';
import type { Channel } from './recipients';

export interface Told {
  /** The event that was told: the visit's where there is one, else the job's. */
  eventId: string;
  personId: string;
  name: string;
  channel: Channel;
  /** When it went, ISO. */
  at: string;
}

/** Who has heard of these events, by which way and when. */
export async function toldOf(eventIds: readonly string[]): Promise<Told[]> {
  const notices = await standingNotices(eventIds);
  const messages = await Message.findAll({ where: { id: notices.map(({ messageId }) => messageId) } });
  return presentTold(notices, messages);
}

/** The notices of these events that have not been taken back. */
export function standingNotices(eventIds: string | readonly string[]): Promise<Notice[]> {
  return Notice.findAll({ where: { eventId: [eventIds].flat(), state: 'standing' } });
}

/** A message that is on its way counts as heard; one that is known not to have arrived does not. */
export async function presentTold(notices: readonly Notice[], messages: readonly Message[]): Promise<Told[]> {
  const byId = new Map(messages.map((message) => [message.id, message]));
  const people = await Person.findAll({ where: { id: notices.map(({ personId }) => personId) } });
  const nameOf = new Map(people.map(({ id, name }) => [id, name]));
  return notices.flatMap(({ eventId, messageId, personId, channel }) => {
    const message = byId.get(messageId);
    if (!message || !hasGone(message)) return [];
    const at = message.settledAt ?? message.claimedAt ?? message.createdAt;
    return [{ eventId, personId, name: nameOf.get(personId) ?? '', channel, at: at.toISOString() }];
  });
}

function hasGone({ status, delivery }: Message): boolean {
  if (status === 'sending' || status === 'unknown') return true;
  return status === 'accepted' && delivery !== 'undelivered' && delivery !== 'failed';
}
