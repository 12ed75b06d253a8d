/** Makes the words of a message from its notices. Inside a unit of work. */
import type { Ctx } from '#server/lib/context';
import { translate } from '#server/lib/translate';
import type { Message, Notice, Person } from '#server/models/index';
import { formatCode } from '#shared/domain/tagCode';
import { nameInText, wordText } from './textWords';
import { calendarFile } from './calendar';
import { loadFacts, visitSequence, type VisitState } from './loadFacts';
import { wordMail } from './mailWords';
import type { NewsFacts } from './newsFacts';
import { unsubscribeToken } from './unsubscribe';

export type Words = Pick<Message, 'subject' | 'body' | 'html' | 'calendar'>;

interface Given {
  message: Message;
  notices: readonly Notice[];
  person: Person;
  visit: VisitState;
  /** Address of the stub. */
  link: string;
}

/** The words of a message, as they will be frozen. */
export async function composeMessage(ctx: Ctx, given: Given): Promise<Words> {
  const facts = await loadFacts(ctx, given);
  if (given.message.channel === 'text') {
    return { subject: null, body: wordText(facts), html: null, calendar: null };
  }
  const isOfVisit = given.notices.some(({ kind }) => kind === 'booked' || kind === 'cancelled');
  const calendar = isOfVisit ? await calendarOf(ctx, facts) : null;
  const { subject, text, html } = wordMail(facts, unsubscribeUrl(ctx, given.person), calendar !== null);
  return { subject, body: text, html, calendar };
}

/** The page on which a person ends the e-mails; one click of a mail program posts to the same address. */
export function unsubscribeUrl(ctx: Pick<Ctx, 'env' | 'shopId'>, person: Pick<Person, 'id'>): string {
  return `${ctx.env.PUBLIC_URL}/u/${unsubscribeToken(ctx.env, ctx.shopId, person.id)}`;
}

async function calendarOf(ctx: Ctx, facts: NewsFacts): Promise<string> {
  const { language, machines, shop, visit } = facts;
  const names = machines.map((machine) => nameInText(language, machine)).join(', ');
  const code = formatCode(visit.stubCode);
  return calendarFile({
    visitId: visit.id,
    host: ctx.env.MAIL_FROM.split('@').at(-1) ?? 'localhost',
    startsAt: visit.arrivesAt,
    stamp: ctx.now,
    sequence: await visitSequence(visit.id, ctx.now),
    isCancelled: machines.length === 0,
    summary: translate(language, 'notices.calendar.summary', { shop: shop.name, n: machines.length }),
    description: `${translate(language, 'notices.calendar.description', { code, machines: names })}\n${facts.link}`,
    location: `${shop.name}, ${shop.address}`,
  });
}
