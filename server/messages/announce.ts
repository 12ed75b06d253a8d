/** What is told of a booking, a cancelled machine, a move and a correction, to whom and how. Inside a unit of work. */
import type { Ctx } from '#server/lib/context';
import { Person, type Job, type JobEvent, type Visit, type VisitEvent } from '#server/models/index';
import type { NoticeKind } from '#server/models/Notice';
import { addNotice, type News } from './noticeStore';
import { bookerAndManagers, bookerOfVisit, managersOf, reachOf, type Reach } from './recipients';

/** Text and e-mail to whoever booked, e-mail to the account's managers; with the calendar file, at once. */
export async function announceBooked(
  ctx: Ctx,
  { visitEvent, visit }: { visitEvent: VisitEvent; visit: Visit },
): Promise<void> {
  await tellOfVisit(ctx, visit, { ...newsOfVisit('booked', visitEvent), mergeable: false });
}

/** The shop cancelled one machine of a visit: the same people, after the grace. */
export async function announceCancelled(
  ctx: Ctx,
  given: { visitEvent: VisitEvent; visit: Visit; jobEvent: JobEvent; job: Job },
): Promise<void> {
  const { visitEvent, visit, jobEvent, job } = given;
  const news = newsOfVisit('cancelled', visitEvent);
  await tellOfVisit(ctx, visit, { ...news, jobEventId: jobEvent.id, jobId: job.id });
}

/** Tells of a stage that a job came to, where the stage is one that is told of. */
export async function announceMove(
  ctx: Ctx,
  { event, job, visit }: { event: JobEvent; job: Job; visit: Visit },
): Promise<void> {
  switch (event.toStage) {
    case 'checked_in': {
      const booker = await bookerOfVisit(visit);
      return tellShortly(ctx, newsOfJob('checked_in', event, job), booker ? [booker] : []);
    }
    case 'ready': {
      const kind = event.outcome === 'repaired' ? 'ready' : 'ready_other';
      return tellShortly(ctx, newsOfJob(kind, event, job), await bookerAndManagers(visit));
    }
    case 'collected':
      return tellByMail(ctx, newsOfJob('collected', event, job), await managersOf(visit.accountId));
    default:
      return undefined;
  }
}

/** One text to each of those who had been told what is now corrected. */
export async function announceCorrected(
  ctx: Ctx,
  given: { event: JobEvent; job: Job; visit: Visit; tell: readonly string[] },
): Promise<void> {
  const people = await Person.findAll({ where: { id: [...new Set(given.tell)], leftAt: null } });
  await tellShortly(ctx, newsOfJob('corrected', given.event, given.job), people);
}

function newsOfVisit(kind: NoticeKind, { id, visitId, at, visibleAt }: VisitEvent): News {
  const event = { eventId: id, visitEventId: id, jobEventId: null, jobId: null };
  return { kind, visitId, ...event, at, releaseAt: visibleAt, mergeable: true };
}

function newsOfJob(kind: NoticeKind, { id, at, visibleAt }: JobEvent, { id: jobId, visitId }: Job): News {
  const event = { eventId: id, visitEventId: null, jobEventId: id, jobId };
  return { kind, visitId, ...event, at, releaseAt: visibleAt, mergeable: true };
}

async function tellOfVisit(ctx: Ctx, visit: Visit, news: News): Promise<void> {
  const booker = await bookerOfVisit(visit);
  const people = await bookerAndManagers(visit);
  await tell(ctx, news, people, (person, reach) => ({
    text: person.id === booker?.id && reach.text,
    email: reach.email,
  }));
}

/** By text; by e-mail at once where no text may go. */
async function tellShortly(ctx: Ctx, news: News, people: Person[]): Promise<void> {
  await tell(ctx, news, people, (_person, { text, email }) => ({ text, email: !text && email }));
}

async function tellByMail(ctx: Ctx, news: News, people: Person[]): Promise<void> {
  await tell(ctx, news, people, (_person, { email }) => ({ text: false, email }));
}

type Choice = (person: Person, reach: Reach) => { text: boolean; email: boolean };

async function tell(ctx: Ctx, news: News, people: Person[], choose: Choice): Promise<void> {
  const reach = await reachOf(people);
  for (const person of people) {
    const known = reach.get(person.id);
    if (!known) continue;
    const { text, email } = choose(person, known);
    if (text) await addNotice(ctx, news, person, 'text');
    if (email) await addNotice(ctx, news, person, 'email');
  }
}
