import { AppError } from '#server/errors';
import { signedInActor, appendJobEvent } from './appendJobEvent';
import { takeBackCheckIn } from './checkInJob';
import { lockJob } from './loadJob';
import { oneOpenJob } from './oneOpenJob';
import { retakePlace } from './places';
import { withdrawNotices } from '#server/messages/withdraw';
import type { Ctx } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { once } from '#server/lib/idempotency';
import { VisitEvent, type Job, type JobEvent } from '#server/models/index';
import { presentMove } from '#server/presenters/move';
import { readEvents } from '#server/queries/jobEvents';
import { mayUndo } from '#shared/policies/abilities';
import type { MoveAnswer } from '#shared/schemas/job';

export interface UndoInput {
  jobId: string;
  eventId: string;
  key: string;
}

/**
 * Takes back the latest standing move while its grace lasts, before any customer heard of it.
 * @throws AppError too_late when the grace has ended or the move is no longer the latest; forbidden;
 * machine_has_open_job when a cancelled machine has been booked anew
 */
export async function undoMove(ctx: Ctx, { jobId, eventId, key }: UndoInput): Promise<MoveAnswer> {
  return oneOpenJob('machine_has_open_job', () =>
    withShop(ctx.shopId, () =>
      once(ctx, { key, act: `undo ${jobId}`, body: eventId }, () => undo(ctx, jobId, eventId)),
    ),
  );
}

async function undo(ctx: Ctx, jobId: string, eventId: string): Promise<MoveAnswer> {
  const job = await lockJob(jobId);
  const { standing } = await readEvents(jobId);
  const latest = standing.at(-1);
  const before = standing.at(-2);
  if (latest?.id !== eventId || latest.kind !== 'moved' || !before || ctx.now >= latest.visibleAt) {
    throw new AppError('too_late');
  }
  const { fromStage, toStage } = latest;
  if (!fromStage || !toStage || !mayUndo(signedInActor(ctx), fromStage, toStage)) {
    throw new AppError('forbidden');
  }
  const event = await appendJobEvent(ctx, job, {
    kind: 'undone',
    fromStage: toStage,
    toStage: fromStage,
    undoesEventId: latest.id,
    visibleAt: ctx.now,
  });
  const { told } = await withdrawNotices(ctx, await eventIdsOf(latest));
  // While this waited for the message's lock the grace may have ended: whoever has heard cannot be made to unhear.
  if (told.length > 0) throw new AppError('too_late');
  await restore(ctx, job, latest, before);
  return presentMove(ctx, job, event);
}

/** A cancelled machine's notices hang on the visit's event. */
async function eventIdsOf(event: JobEvent): Promise<string[]> {
  const ofVisit = await VisitEvent.findAll({ where: { jobEventId: event.id } });
  return [event.id, ...ofVisit.map(({ id }) => id)];
}

async function restore(ctx: Ctx, job: Job, latest: JobEvent, before: JobEvent): Promise<void> {
  await job.update({
    stage: latest.fromStage ?? job.stage,
    stageSince: before.at,
    outcome: before.outcome,
    partsReason: before.partsReason,
    version: job.version + 1,
  });
  if (latest.toStage === 'checked_in') await takeBackCheckIn(ctx, job, latest);
  if (latest.toStage === 'cancelled' && job.halfDayId) {
    await retakePlace(ctx, job.halfDayId, 'a cancel was undone');
  }
}
