import { JobEvent } from '#server/models/index';
import { foldEvents, type Standing } from '#shared/domain/standing';

/** A job's events in order, with which of them stand. Inside a unit of work. */
export async function readEvents(jobId: string): Promise<Standing<JobEvent> & { events: JobEvent[] }> {
  const events = await JobEvent.findAll({ where: { jobId }, order: [['seq', 'ASC']] });
  return { events, ...foldEvents(events) };
}
