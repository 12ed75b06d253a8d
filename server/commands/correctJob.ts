import { AppError, fieldError } from '#server/errors';
import { appendJobEvent } from './appendJobEvent';
import { takeBackCheckIn } from './checkInJob';
import { lockJob, refuseIfMoved } from './loadJob';
import { oneOpenJob } from './oneOpenJob';
import { retakePlace } from './places';
import { announceCorrected } from '#server/messages/announce';
import { withdrawNotices } from '#server/messages/withdraw';
import type { Ctx } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { once } from '#server/lib/idempotency';
import { settingsOf, unitShopOf } from '#server/lib/shops';
import { Visit, VisitEvent, type Job, type JobEvent } from '#server/models/index';
import { presentMove } from '#server/presenters/move';
import { correctStages } from '#server/queries/correctStages';
import { readEvents } from '#server/queries/jobEvents';
import { takenBack } from '#shared/domain/standing';
import type { CorrectBody, MoveAnswer } from '#shared/schemas/job';

export interface CorrectInput {
  jobId: string;
  body: CorrectBody;
  key: string;
}

/**
 * Puts a job back to an earlier stage, with a reason. Withdraws what has not gone, and tells those who were already
 * told when asked to.
 * @throws AppError moved_meanwhile, forbidden, machine_has_open_job, or invalid by field
 */
export async function correctJob(ctx: Ctx, { jobId, body, key }: CorrectInput): Promise<MoveAnswer> {
  return oneOpenJob('machine_has_open_job', () =>
    withShop(ctx.shopId, () =>
      once(ctx, { key, act: `correct ${jobId}`, body }, () => correct(ctx, jobId, body)),
    ),
  );
}

async function correct(ctx: Ctx, jobId: string, body: CorrectBody): Promise<MoveAnswer> {
  const job = await lockJob(jobId);
  await refuseIfMoved(job, body.version);
  const { standing } = await readEvents(jobId);
  const shop = await unitShopOf(ctx.shopId);
  const allowed = correctStages(ctx, job, standing, shop.zone);
  if (allowed.length === 0) throw new AppError('forbidden');
  if (!allowed.includes(body.to)) throw fieldError('to', 'errors.field.not_earlier');
  const back = standing.findLast((event) => event.toStage === body.to);
  const wrong = takenBack(standing, body.to);
  const { graceSeconds } = await settingsOf(ctx.shopId);
  const wasCancelled = job.stage === 'cancelled';
  const event = await appendJobEvent(ctx, job, {
    kind: 'corrected',
    fromStage: job.stage,
    toStage: body.to,
    outcome: back?.outcome ?? null,
    partsReason: back?.partsReason ?? null,
    reason: body.reason,
    details: { takenBack: wrong.map(({ id }) => id) },
    visibleAt: new Date(ctx.now.getTime() + graceSeconds * 1000),
  });
  await job.update({
    stage: body.to,
    stageSince: ctx.now,
    outcome: event.outcome,
    partsReason: event.partsReason,
    version: job.version + 1,
  });
  const checkIn = wrong.find((taken) => taken.toStage === 'checked_in');
  if (checkIn) await takeBackCheckIn(ctx, job, checkIn);
  if (wasCancelled && job.halfDayId) await retakePlace(ctx, job.halfDayId, body.reason);
  await tellAgain(ctx, job, event, wrong, body.tell);
  return presentMove(ctx, job, event);
}

async function tellAgain(
  ctx: Ctx,
  job: Job,
  event: JobEvent,
  wrong: JobEvent[],
  tell: boolean,
): Promise<void> {
  const ids = wrong.map(({ id }) => id);
  const ofVisit = await VisitEvent.findAll({ where: { jobEventId: ids } });
  const { told } = await withdrawNotices(ctx, [...ids, ...ofVisit.map(({ id }) => id)]);
  if (!tell || told.length === 0) return;
  const visit = await Visit.findByPk(job.visitId, { rejectOnEmpty: true });
  await announceCorrected(ctx, { event, job, visit, tell: told.map(({ personId }) => personId) });
}
