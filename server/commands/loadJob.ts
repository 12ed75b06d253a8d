import { AppError } from '#server/errors';
import { withShop } from '#server/lib/db';
import { Job, JobEvent, Tag } from '#server/models/index';
import { isCode, normalizeCode } from '#shared/domain/tagCode';
import type { MovedMeanwhileDetails } from '#shared/schemas/job';

/**
 * The id of the job that a tag code names, present or past, in a unit of its own.
 * @throws AppError not_found
 */
export async function jobIdByTag(shopId: string, typed: string | undefined): Promise<string> {
  const code = normalizeCode(typed ?? '');
  const tag = isCode(code) ? await withShop(shopId, () => Tag.findOne({ where: { code } })) : null;
  if (!tag?.jobId) throw new AppError('not_found');
  return tag.jobId;
}

/** The job's row, locked until the unit ends: whatever moves a job goes one at a time. */
export async function lockJob(jobId: string): Promise<Job> {
  const job = await Job.findByPk(jobId, { lock: true });
  if (!job) throw new AppError('not_found');
  return job;
}

/** @throws AppError moved_meanwhile, saying where it stands now, who moved it and when */
export async function refuseIfMoved(job: Job, version: number): Promise<void> {
  if (job.version === version) return;
  const last = await JobEvent.findOne({ where: { jobId: job.id }, order: [['seq', 'DESC']] });
  const details: MovedMeanwhileDetails = {
    stage: job.stage,
    version: job.version,
    by: last?.byName ?? '',
    at: (last?.at ?? job.stageSince).toISOString(),
  };
  throw new AppError('moved_meanwhile', { details });
}
