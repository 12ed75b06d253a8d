import { AppError } from '#server/errors';
import type { Ctx } from '#server/lib/context';
import { rows } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { JobEvent, type Job } from '#server/models/index';
import type { Actor } from '#shared/domain/roles';

type Facts = Pick<JobEvent, 'kind' | 'visibleAt'> &
  Partial<
    Pick<
      JobEvent,
      'fromStage' | 'toStage' | 'outcome' | 'partsReason' | 'undoesEventId' | 'reason' | 'details'
    >
  >;

/** Adds one event to a job whose row is locked. */
export async function appendJobEvent(ctx: Ctx, job: Job, facts: Facts): Promise<JobEvent> {
  const [last] = await rows<{ seq: number }>(
    'select coalesce(max(seq), 0) as seq from job_events where job_id = $1',
    [job.id],
  );
  const actor = signedInActor(ctx);
  return JobEvent.create({
    shopId: ctx.shopId,
    id: newId(),
    jobId: job.id,
    seq: (last?.seq ?? 0) + 1,
    at: ctx.now,
    personId: actor.personId,
    byName: actor.name,
    ...facts,
  });
}

/** Who acts, where only somebody signed in can. */
export function signedInActor(ctx: Ctx): Actor {
  if (!ctx.actor) throw new AppError('unauthenticated');
  return ctx.actor;
}
