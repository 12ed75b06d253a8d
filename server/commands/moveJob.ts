/** Moves a job to another stage: the rule, the signed lines, the event, the places and the notices, all or nothing. */
import { appendJobEvent, signedInActor } from './appendJobEvent';
import { checkInJob } from './checkInJob';
import { lockJob, refuseIfMoved } from './loadJob';
import { oneOpenJob } from './oneOpenJob';
import { givePlaceBack } from './places';
import { refuseMove } from './refuseMove';
import { announceCancelled, announceMove } from '#server/messages/announce';
import type { Ctx } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { once } from '#server/lib/idempotency';
import { settingsOf } from '#server/lib/shops';
import { JobNote, SignedLine, Visit, VisitEvent, type Job, type JobEvent } from '#server/models/index';
import { presentMove } from '#server/presenters/move';
import { problemsOfMove } from '#shared/domain/moves';
import type { MoveAnswer, MoveBody } from '#shared/schemas/job';

export interface MoveInput {
  jobId: string;
  body: MoveBody;
  key: string;
}

/**
 * Moves a job once per key.
 * @throws AppError moved_meanwhile, move_refused, forbidden, machine_has_open_job, or invalid by field
 */
export async function moveJob(ctx: Ctx, { jobId, body, key }: MoveInput): Promise<MoveAnswer> {
  return oneOpenJob('machine_has_open_job', () =>
    withShop(ctx.shopId, () => once(ctx, { key, act: `move ${jobId}`, body }, () => move(ctx, jobId, body))),
  );
}

async function move(ctx: Ctx, jobId: string, body: MoveBody): Promise<MoveAnswer> {
  const job = await lockJob(jobId);
  await refuseIfMoved(job, body.version);
  const settings = await settingsOf(ctx.shopId);
  const { roles } = signedInActor(ctx);
  const intent = { ...body, from: job.stage, roles, unpaidLimitCents: settings.unpaidLimitCents };
  refuseMove(problemsOfMove(intent), body.lines);
  const event = await appendJobEvent(ctx, job, {
    kind: 'moved',
    fromStage: job.stage,
    toStage: body.to,
    outcome: body.outcome ?? (body.to === 'collected' || body.to === 'disposed' ? job.outcome : null),
    partsReason: body.partsReason,
    visibleAt: new Date(ctx.now.getTime() + settings.graceSeconds * 1000),
    details: body.checkIn ? checkInFacts(body.checkIn) : {},
  });
  await applyMove(ctx, job, event, body);
  await announce(ctx, job, event);
  return presentMove(ctx, job, event);
}

function checkInFacts(checkIn: NonNullable<MoveBody['checkIn']>): Record<string, unknown> {
  const { tankBled, fuelOff, leftWithIt } = checkIn;
  return { tankBled, fuelOff, leftWithIt };
}

async function applyMove(ctx: Ctx, job: Job, event: JobEvent, body: MoveBody): Promise<void> {
  await job.update({
    stage: body.to,
    stageSince: ctx.now,
    outcome: event.outcome,
    partsReason: body.to === 'awaiting_parts' ? body.partsReason : null,
    version: job.version + 1,
  });
  if (body.checkIn) await checkInJob(ctx, job, event, body.checkIn);
  if (body.to === 'cancelled' && job.halfDayId) await givePlaceBack(job.halfDayId);
  const { personId, name: byName } = signedInActor(ctx);
  const by = { personId, byName, at: ctx.now };
  for (const { guard, mode, how, leftOut, why, amountCents = null } of body.lines) {
    const line = { guard, mode, how, leftOut, why, amountCents, ...by };
    await SignedLine.create({ shopId: ctx.shopId, id: newId(), jobId: job.id, eventId: event.id, ...line });
  }
  if (body.note) {
    await JobNote.create({ shopId: ctx.shopId, id: newId(), jobId: job.id, body: body.note, ...by });
  }
}

async function announce(ctx: Ctx, job: Job, event: JobEvent): Promise<void> {
  const visit = await Visit.findByPk(job.visitId, { rejectOnEmpty: true });
  if (event.toStage !== 'cancelled') return announceMove(ctx, { event, job, visit });
  const visitEvent = await VisitEvent.create({
    shopId: ctx.shopId,
    id: newId(),
    visitId: visit.id,
    kind: 'cancelled',
    at: ctx.now,
    visibleAt: event.visibleAt,
    personId: event.personId,
    byName: event.byName,
    jobEventId: event.id,
  });
  return announceCancelled(ctx, { visitEvent, visit, jobEvent: event, job });
}
