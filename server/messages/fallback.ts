/** A text that cannot arrive is told by e-mail instead. Inside a unit of work, the visit's messages locked. */
import type { Ctx } from '#server/lib/context';
import { Notice, Person, type Message } from '#server/models/index';
import type { Problem } from './problems';
import { addNotices, type News } from './noticeStore';
import { reachOfOne } from './recipients';

/** Gives what a text carried to an e-mail of its own; what the person has by e-mail already is not said twice. */
export async function fallBackToEmail(ctx: Ctx, message: Message): Promise<'email' | 'no_email'> {
  const person = message.personId ? await Person.findByPk(message.personId) : null;
  if (!person || !(await reachOfOne(person)).email) return 'no_email';
  const notices = await Notice.findAll({ where: { messageId: message.id, state: 'standing' } });
  await addNotices(ctx, notices.map(newsOf), person, 'email');
  return 'email';
}

/** Ends a text that may not go and tells by e-mail. Where there is no e-mail, the problem says so. */
export async function turnToEmail(ctx: Ctx, message: Message, problem: Problem): Promise<void> {
  const way = await fallBackToEmail(ctx, message);
  const { status, shown } =
    way === 'email'
      ? { status: 'withdrawn' as const, shown: problem }
      : { status: 'failed' as const, shown: 'no_email' as const };
  await message.update({ status, problem: shown, settledAt: ctx.now, queuedAt: null });
}

function newsOf(notice: Notice): News {
  const { kind, visitId, visitEventId, jobEventId, jobId, eventId, createdAt, releaseAt } = notice;
  const event = { kind, visitId, visitEventId, jobEventId, jobId, eventId };
  return { ...event, at: createdAt, releaseAt, mergeable: true };
}
