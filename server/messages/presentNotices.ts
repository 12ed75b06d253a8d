/** A job's notices as staff see them: what went, what is held and until when, what went wrong. Inside a unit of work. */
import { Op } from 'sequelize';
import type { Ctx } from '#server/lib/context';
import { Message, Notice, Person } from '#server/models/index';
import type { NoticeView } from '#shared/schemas/job';
import { composeMessage } from './composeMessage';
import { readVisitState, type VisitState } from './loadFacts';
import { problemWords } from './problems';

/** The notices about one job, and those about its visit as a whole, newest first. */
export async function presentNotices(ctx: Ctx, jobId: string, visitId: string): Promise<NoticeView[]> {
  const notices = await Notice.findAll({
    where: { visitId, jobId: { [Op.or]: [jobId, null] } },
    order: [
      ['createdAt', 'DESC'],
      ['id', 'ASC'],
    ],
  });
  const messages = await byId(Message.findAll({ where: { id: notices.map(({ messageId }) => messageId) } }));
  const people = await byId(Person.findAll({ where: { id: notices.map(({ personId }) => personId) } }));
  const visit = await readVisitState(visitId, ctx.now);
  const bodies = await bodiesOf(ctx, [...messages.values()], people, visit);
  return notices.flatMap((notice) => {
    const message = messages.get(notice.messageId);
    const personName = people.get(notice.personId)?.name ?? '';
    return message ? [presentNotice(ctx, notice, message, personName, bodies.get(message.id) ?? null)] : [];
  });
}

async function byId<R extends { id: string }>(found: Promise<R[]>): Promise<Map<string, R>> {
  return new Map((await found).map((row) => [row.id, row]));
}

function presentNotice(
  ctx: Ctx,
  notice: Notice,
  message: Message,
  personName: string,
  body: string | null,
): NoticeView {
  const { id, kind, channel } = notice;
  const state = stateOf(ctx, notice, message);
  return {
    id,
    kind,
    channel,
    personName,
    state,
    to: message.toAddress,
    releaseAt: state === 'held' ? message.notBefore.toISOString() : null,
    settledAt: message.settledAt?.toISOString() ?? null,
    body,
    problem: problemWords(message),
  };
}

function stateOf(ctx: Ctx, notice: Notice, { status, delivery, notBefore }: Message): NoticeView['state'] {
  if (notice.state !== 'standing') return notice.state;
  if (status === 'pending') return notBefore > ctx.now ? 'held' : 'waiting';
  if (status === 'unknown') return 'sending';
  if (status === 'demo') return 'not_sent_demo';
  if (status !== 'accepted') return status;
  return delivery === null || delivery === 'queued' || delivery === 'sending' ? 'accepted' : delivery;
}

/** What was said; for what is still held, what would be said as things stand. */
async function bodiesOf(
  ctx: Ctx,
  messages: readonly Message[],
  people: ReadonlyMap<string, Person>,
  visit: VisitState,
): Promise<Map<string, string | null>> {
  const bodies = new Map<string, string | null>();
  for (const message of messages) {
    const person = people.get(message.personId ?? '');
    const isOpen = (message.status === 'pending' || message.status === 'demo') && message.body === null;
    bodies.set(message.id, isOpen && person ? await preview(ctx, message, person, visit) : message.body);
  }
  return bodies;
}

/** The link is made when the text goes; here a mark of the same length stands for it. */
async function preview(
  ctx: Ctx,
  message: Message,
  person: Person,
  visit: VisitState,
): Promise<string | null> {
  const notices = await Notice.findAll({ where: { messageId: message.id, state: 'standing' } });
  const link = `${ctx.env.PUBLIC_URL}/t/${'.'.repeat(22)}`;
  const { body } = await composeMessage(ctx, { message, notices, person, visit, link });
  return body;
}
