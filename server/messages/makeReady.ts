/**
 * The last look before a message goes: whether it is its turn, whether the person may be told this way and now, which
 * of its notices are still true. Then the words are made and frozen. Inside a unit of work, on the locked row.
 */
import type { Ctx } from '#server/lib/context';
import { rows } from '#server/lib/db';
import { settingsOf } from '#server/lib/shops';
import { Notice, Person, type Message } from '#server/models/index';
import { composeMessage } from './composeMessage';
import { turnToEmail } from './fallback';
import { readVisitState, type VisitState } from './loadFacts';
import { messageLink } from './messageLink';
import { recipientOf, setRelease, splitOff } from './noticeStore';
import { isOptedOut } from './optOut';
import type { Problem } from './problems';
import { reachOfOne } from './recipients';
import { goesAt } from './release';
import { judgeBooking, judgeJobNotice, type Verdict } from './truth';

/** Whether the message may go now, its words made. If not, the row says why: later, elsewhere, or not at all. */
export async function makeReady(ctx: Ctx, message: Message): Promise<boolean> {
  const { sending } = await settingsOf(ctx.shopId);
  if (!sending) return false;
  if (message.kind !== 'notices') return isStillWanted(ctx, message);
  if (await hasEarlierUnsettled(message)) return false;
  const person = await readerOf(ctx, message);
  if (!person || !(await isHour(ctx, message, person))) return false;
  return (await keepTrueNotices(ctx, message, person)) && freezeWords(ctx, message, person);
}

/** A code goes to no phone that said STOP meanwhile; the answer to such a word does. */
async function isStillWanted(ctx: Ctx, message: Message): Promise<boolean> {
  if (message.kind !== 'code' || !(await isOptedOut(message.toAddress))) return true;
  await message.update({ status: 'failed', problem: 'opted_out', settledAt: ctx.now, body: null });
  return false;
}

/**
 * News of one visit reach one person in order. Each way has its own order: a mail server that is away holds up no
 * text.
 */
async function hasEarlierUnsettled({ id, personId, visitId, channel, createdAt }: Message): Promise<boolean> {
  const [row] = await rows<{ waits: boolean }>(
    `select exists (select 1 from messages where person_id = $1 and visit_id = $2 and channel = $3
       and status in ('pending', 'sending', 'unknown') and (created_at, id) < ($4, $5::uuid)) as waits`,
    [personId, visitId, channel, createdAt, id],
  );
  return row?.waits ?? false;
}

/** The person, if still to be told this way; what they chose meanwhile counts. */
async function readerOf(ctx: Ctx, message: Message): Promise<Person | null> {
  const person = message.personId ? await Person.findByPk(message.personId) : null;
  if (!person || person.leftAt) return withdraw(ctx, message, 'left');
  const reach = await reachOfOne(person);
  if (message.channel === 'email') {
    if (!reach.email) return withdraw(ctx, message, 'email_stopped');
  } else if (!reach.text) {
    await turnToEmail(ctx, message, reach.texts === 'opted_out' ? 'opted_out' : 'no_consent');
    return null;
  }
  const address = (message.channel === 'text' ? person.phone : person.email) ?? message.toAddress;
  // Once words went out to an address, the look-up must find them there.
  if (message.attempt === 0 && address !== message.toAddress) await message.update({ toAddress: address });
  return person;
}

async function withdraw(ctx: Ctx, message: Message, problem: Problem): Promise<null> {
  await message.update({ status: 'withdrawn', problem, settledAt: ctx.now, queuedAt: null });
  return null;
}

/** A worker that was away does not make up for it by night. */
async function isHour(ctx: Ctx, message: Message, person: Person): Promise<boolean> {
  const { notBefore, heldFor } = goesAt(message.notBefore, ctx.now, await recipientOf(ctx, person));
  if (notBefore <= ctx.now) return true;
  await message.update({ notBefore, heldFor, queuedAt: null });
  return false;
}

/** Ends notices that are no longer true and parts those whose time has not come. False: nothing is left to say now. */
async function keepTrueNotices(ctx: Ctx, message: Message, person: Person): Promise<boolean> {
  const notices = await Notice.findAll({ where: { messageId: message.id, state: 'standing' } });
  const visit = await readVisitState(message.visitId ?? '', ctx.now);
  const now: Notice[] = [];
  const later: Notice[] = [];
  let isOvertaken = false;
  for (const notice of notices) {
    const verdict = notice.releaseAt > ctx.now ? 'early' : judge(notice, visit);
    if (verdict === 'stands') now.push(notice);
    else if (verdict === 'early') later.push(notice);
    else if (typeof verdict === 'object') later.push(await notice.update({ releaseAt: verdict.waitsUntil }));
    else await notice.update({ state: verdict });
    isOvertaken ||= verdict === 'overtaken';
  }
  if (now.length > 0) {
    // Frozen words keep what they speak of.
    if (later.length > 0 && message.body === null) await splitOff(ctx, message, person, later);
    return true;
  }
  if (later.length > 0) await setRelease(ctx, message, person);
  else await endEmpty(ctx, message, isOvertaken ? 'overtaken' : 'withdrawn');
  return false;
}

async function endEmpty(ctx: Ctx, message: Message, status: 'overtaken' | 'withdrawn'): Promise<void> {
  await message.update({ status, settledAt: ctx.now, queuedAt: null });
}

function judge(notice: Notice, visit: VisitState): Verdict {
  if (notice.kind === 'booked') return judgeBooking(visit.jobs.map(({ state }) => state));
  const job = visit.jobs.find(({ id }) => id === notice.jobId);
  return job ? judgeJobNotice(notice, job.state) : 'overtaken';
}

/** The look-up needs equal words, so they are made once; a message that is tried again keeps them. */
async function freezeWords(ctx: Ctx, message: Message, person: Person): Promise<boolean> {
  if (message.body !== null) return true;
  const notices = await Notice.findAll({
    where: { messageId: message.id, state: 'standing' },
    order: ['createdAt', 'id'],
  });
  const visit = await readVisitState(message.visitId ?? '', ctx.now);
  const link = await messageLink(ctx, message);
  await message.update(await composeMessage(ctx, { message, notices, person, visit, link }));
  return true;
}
