/** Notices and the messages that carry them. Inside a unit of work. */
import { Op } from 'sequelize';
import type { Ctx } from '#server/lib/context';
import { rows } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { enqueueMessages } from '#server/lib/queue';
import { settingsOf } from '#server/lib/shops';
import { Account, Message, Notice, Shop, type Person } from '#server/models/index';
import type { NoticeKind } from '#server/models/Notice';
import { goesAt, releaseOf, type NoticeTimes, type Recipient } from './release';
import type { Channel } from './recipients';

/** What there is to tell. */
export interface News {
  kind: NoticeKind;
  visitId: string;
  visitEventId: string | null;
  jobEventId: string | null;
  jobId: string | null;
  /** The event that the notice is about: the visit's where there is one, else the job's. */
  eventId: string;
  at: Date;
  releaseAt: Date;
  /** What a customer did himself goes at once and alone; the shop's changes wait for their grace and are merged. */
  mergeable: boolean;
}

/**
 * Serializes whatever adds to or splits the messages of one visit, so that two changes at once still end in one
 * text. Taken before any message's row is locked.
 */
export async function lockVisitMessages(visitId: string): Promise<void> {
  await rows('select pg_advisory_xact_lock(hashtextextended($1, 12))', [visitId]);
}

/** Adds one notice to one person, unless that person has it already. */
export async function addNotice(ctx: Ctx, news: News, person: Person, channel: Channel): Promise<void> {
  await addNotices(ctx, [news], person, channel);
}

/** Adds notices about one visit to one person on one message. Those that the person has already are passed over. */
export async function addNotices(
  ctx: Ctx,
  all: readonly News[],
  person: Person,
  channel: Channel,
): Promise<void> {
  const [first] = all;
  if (!first) return;
  await lockVisitMessages(first.visitId);
  const eventIds = all.map(({ eventId }) => eventId);
  const known = await Notice.findAll({ where: { eventId: eventIds, personId: person.id, channel } });
  const fresh = all.filter(({ eventId }) => !known.some((notice) => notice.eventId === eventId));
  if (fresh.length === 0) return;
  const message =
    (await findOpenMessage(ctx, first, person, channel)) ?? (await newMessage(ctx, first, person, channel));
  for (const news of fresh) await createNotice(ctx, news, message, person, channel);
  await setRelease(ctx, message, person);
}

function createNotice(
  ctx: Ctx,
  news: News,
  message: Message,
  person: Person,
  channel: Channel,
): Promise<Notice> {
  const { kind, visitId, visitEventId, jobEventId, jobId, eventId, at, releaseAt } = news;
  return Notice.create({
    shopId: ctx.shopId,
    id: newId(),
    ...{ kind, visitId, visitEventId, jobEventId, jobId, eventId, releaseAt },
    personId: person.id,
    channel,
    messageId: message.id,
    createdAt: at,
  });
}

/** The message that still waits for changes like this one. One whose time has come is no longer added to. */
async function findOpenMessage(
  ctx: Ctx,
  news: News,
  person: Person,
  channel: Channel,
): Promise<Message | null> {
  if (!news.mergeable) return null;
  return Message.findOne({
    where: {
      personId: person.id,
      visitId: news.visitId,
      channel,
      kind: 'notices',
      mergeable: true,
      status: 'pending',
      body: null,
      notBefore: { [Op.gt]: ctx.now },
    },
    order: [['createdAt', 'DESC']],
    lock: true,
  });
}

function newMessage(ctx: Ctx, news: News, person: Person, channel: Channel): Promise<Message> {
  return Message.create({
    shopId: ctx.shopId,
    id: newId(),
    kind: 'notices',
    channel,
    personId: person.id,
    visitId: news.visitId,
    toAddress: (channel === 'text' ? person.phone : person.email) ?? '',
    language: person.language,
    mergeable: news.mergeable,
    status: 'pending',
    createdAt: ctx.now,
    notBefore: news.releaseAt,
  });
}

/** Works out anew when a message goes, from the notices that still stand on it, and queues what is due. */
export async function setRelease(ctx: Ctx, message: Message, person: Person): Promise<void> {
  const notices = await Notice.findAll({ where: { messageId: message.id, state: 'standing' } });
  const { graceSeconds } = await settingsOf(ctx.shopId);
  const release = releaseOf(notices, graceSeconds * 1000);
  const { notBefore, heldFor } = goesAt(release, ctx.now, await recipientOf(ctx, person));
  const isDue = notBefore <= ctx.now;
  await message.update({ notBefore, heldFor, queuedAt: isDue ? ctx.now : null });
  if (isDue) await enqueueMessages([message.id]);
}

/** Whose night counts, and when that person last acted. */
export async function recipientOf(ctx: Pick<Ctx, 'shopId'>, person: Person): Promise<Recipient> {
  const { quietFrom, quietTo } = await settingsOf(ctx.shopId);
  const shop = await Shop.findByPk(ctx.shopId, { rejectOnEmpty: true });
  const account = person.accountId ? await Account.findByPk(person.accountId) : null;
  return {
    zone: person.zone ?? account?.zone ?? shop.zone,
    quiet: { from: quietFrom, to: quietTo },
    lastActedAt: person.lastActedAt,
  };
}

/** Splits notices off into a message of their own, which follows the first. */
export async function splitOff(
  ctx: Ctx,
  message: Message,
  person: Person,
  rest: readonly (NoticeTimes & { id: string })[],
): Promise<void> {
  const { shopId, kind, channel, personId, visitId, toAddress, language } = message;
  const following = await Message.create({
    ...{ shopId, kind, channel, personId, visitId, toAddress, language },
    id: newId(),
    mergeable: true,
    status: 'pending',
    createdAt: ctx.now,
    notBefore: message.notBefore,
  });
  await Notice.update({ messageId: following.id }, { where: { id: rest.map(({ id }) => id) } });
  await setRelease(ctx, following, person);
}
