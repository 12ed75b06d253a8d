import { Op } from 'sequelize';
import type { Ctx } from '#server/lib/context';
import { unitShopOf } from '#server/lib/shops';
import { toldOf } from '#server/messages/told';
import { presentNotices } from '#server/messages/presentNotices';
import { textsOfVisit } from '#server/messages/presentTexts';
import {
  Account,
  Job,
  JobNote,
  Person,
  SignedLine,
  Visit,
  VisitEvent,
  type JobEvent,
} from '#server/models/index';
import { correctStages } from '#server/queries/correctStages';
import { readEvents } from '#server/queries/jobEvents';
import { railJob } from '#server/queries/railJobs';
import { takenBack, type Standing } from '#shared/domain/standing';
import type { Stage } from '#shared/domain/stages';
import { abilitiesOf } from '#shared/policies/abilities';
import type { HistoryItem, JobSheet, SignedLineView, ToldView } from '#shared/schemas/job';
import { presentPeople } from './people';
import { presentRailJob } from './railJob';

/** Everything the shop knows of one job. Inside a unit of work. */
export async function presentJobSheet(ctx: Ctx, jobId: string): Promise<JobSheet> {
  const job = await Job.findByPk(jobId, { rejectOnEmpty: true });
  const visit = await Visit.findByPk(job.visitId, { rejectOnEmpty: true });
  const shop = await unitShopOf(ctx.shopId);
  const history = await readEvents(jobId);
  const found = await SignedLine.findAll({ where: { jobId }, order: [['at', 'ASC']] });
  const lines = found.map((line) => presentLine(line, history));
  const correctTo = correctStages(ctx, job, history.standing, shop.zone);
  return {
    now: ctx.now.toISOString(),
    zone: shop.zone,
    unpaidLimitCents: shop.settings.unpaidLimitCents,
    job: await presentJob(ctx, job, visit, lines),
    people: await presentPeople(await peopleOf(visit, job)),
    history: history.events.map((event) => presentEvent(event, history, ctx.now)),
    notes: (await JobNote.findAll({ where: { jobId }, order: [['at', 'DESC']] })).map(presentNote),
    lines,
    notices: await presentNotices(ctx, jobId, visit.id),
    texts: await textsOfVisit(visit.id),
    told: await presentTold(history.standing, correctTo),
    correctTo,
    abilities: ctx.actor ? abilitiesOf(ctx.actor) : [],
  };
}

async function presentJob(
  ctx: Ctx,
  job: Job,
  visit: Visit,
  lines: readonly SignedLineView[],
): Promise<JobSheet['job']> {
  const row = await railJob(job.id);
  const billed = await Account.findByPk(job.billedAccountId, { rejectOnEmpty: true });
  if (!row) throw new Error(`job ${job.id} has no current tag`);
  return {
    ...presentRailJob(row, ctx.actor, ctx.now),
    visit: { id: visit.id, stubCode: visit.stubCode, note: visit.note },
    billed: { id: billed.id, name: billed.name },
    broughtBy: job.broughtByName || null,
    leftWithIt: job.leftWithIt,
    outcomeNote: job.outcome === 'partly_repaired' ? whatIsLeft(lines) : '',
  };
}

/** A partly repaired machine goes out with the words on what is left. */
function whatIsLeft(lines: readonly SignedLineView[]): string {
  return lines.findLast(({ guard, voided }) => guard === 'what_is_left' && !voided)?.how ?? '';
}

/** Whom the shop may want to call: who booked, who brought it, and the managers of whoever is billed. */
function peopleOf(visit: Visit, job: Job): Promise<Person[]> {
  const ids = [visit.bookedByPersonId, job.broughtByPersonId].filter((id) => id !== null);
  return Person.findAll({
    where: {
      [Op.or]: [
        { id: ids },
        { accountId: job.billedAccountId, leftAt: null, roles: { [Op.contains]: ['manager'] } },
      ],
    },
    order: ['name'],
  });
}

/** Who has been told of the moves, each with the corrections that would make wrong what was told. */
async function presentTold(standing: JobEvent[], correctTo: readonly Stage[]): Promise<ToldView[]> {
  const moves = standing.filter((event) => event.kind !== 'booked');
  const ofVisit = await VisitEvent.findAll({ where: { jobEventId: moves.map(({ id }) => id) } });
  const moveOf = new Map(ofVisit.map(({ id, jobEventId }) => [id, jobEventId]));
  const told = await toldOf([...moves.map(({ id }) => id), ...moveOf.keys()]);
  return told.map(({ eventId, ...one }) => {
    const moveId = moveOf.get(eventId) ?? eventId;
    const isWrong = (stage: Stage) => takenBack(standing, stage).some(({ id }) => id === moveId);
    return { ...one, wrongAfter: correctTo.filter(isWrong) };
  });
}

function presentEvent(event: JobEvent, { undone, corrected }: Standing<JobEvent>, now: Date): HistoryItem {
  return {
    id: event.id,
    at: event.at.toISOString(),
    kind: event.kind,
    from: event.fromStage,
    to: event.toStage,
    outcome: event.outcome,
    by: event.byName,
    reason: event.reason,
    visibleAt: event.visibleAt > now ? event.visibleAt.toISOString() : null,
    undone: undone.has(event.id) || corrected.has(event.id),
  };
}

function presentNote({ id, at, byName, body }: JobNote) {
  return { id, at: at.toISOString(), by: byName, body };
}

function presentLine(line: SignedLine, { undone, corrected }: Standing<JobEvent>): SignedLineView {
  const { id, guard, mode, how, leftOut, why, amountCents } = line;
  const voided = undone.has(line.eventId) || corrected.has(line.eventId);
  return {
    id,
    at: line.at.toISOString(),
    by: line.byName,
    guard,
    mode,
    how,
    leftOut,
    why,
    amountCents,
    voided,
  };
}
