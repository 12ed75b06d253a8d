import { heldNotices } from '#server/messages/held';
import type { Ctx } from '#server/lib/context';
import type { Job, JobEvent } from '#server/models/index';
import { railJob } from '#server/queries/railJobs';
import { presentRailJob } from './railJob';
import type { MoveAnswer } from '#shared/schemas/job';

/** The answer to a move, undo or correction: the job as it stands now, and what is held for whom. */
export async function presentMove(ctx: Ctx, job: Job, event: JobEvent): Promise<MoveAnswer> {
  const row = await railJob(job.id);
  if (!row) throw new Error(`job ${job.id} has no current tag`);
  return { job: presentRailJob(row, ctx.actor, ctx.now), held: await heldNotices(event.id) };
}
