/** The short lines of the Rail: what a tag's foot and a rail's plate say. */
import type { PartsReason, Stage } from '#shared/domain/stages';
import { formatDay, formatTime } from '#shared/domain/when';
import type { RailJob } from '#shared/schemas/job';
import { ageWords } from '@/components/job/ageWords';

/** What a machine that awaits parts waits for. */
export const WAITS_FOR: Record<PartsReason, string> = {
  part: 'Waits for a part',
  outside_work: 'Waits for outside work',
  makers_answer: "Waits for the maker's answer",
};

/** "11:40 am" today, else "Thu 3 Dec, 9:30 am". */
export function shortWhen(instant: string, now: Date, zone: string): string {
  const day = formatDay(instant, zone, 'en');
  const time = formatTime(instant, zone, 'en');
  return day === formatDay(now, zone, 'en') ? time : `${day}, ${time}`;
}

/** How long the tag has hung on its rail; says nothing where the machine is not in the shop. */
export function ageOf(job: RailJob, now: Date): string {
  return job.stage === 'booked' || job.stage === 'collected' ? '' : ageWords(job.stageSince, now);
}

/** The line at a tag's foot: when it arrives, what it waits for, how it ended. */
export function footOf(job: RailJob, now: Date, zone: string, outcomeOf: (job: RailJob) => string): string {
  if (job.stage === 'booked') return arrival(job, now, zone);
  if (job.stage === 'collected') return `Out ${shortWhen(job.stageSince, now, zone)}`;
  if (job.stage === 'awaiting_parts' && job.partsReason) return WAITS_FOR[job.partsReason];
  return job.stage === 'ready' && job.outcome ? outcomeOf(job) : '';
}

function arrival(job: RailJob, now: Date, zone: string): string {
  const today = formatDay(job.arrivesAt, zone, 'en') === formatDay(now, zone, 'en');
  const late = new Date(job.arrivesAt) < now;
  const when = shortWhen(job.arrivesAt, now, zone);
  if (late) return `Was due ${when}`;
  return today ? `In today ${when}` : `In ${when}`;
}

/** The plate's last line: the next arrival, or how long the oldest tag has hung. */
export function oldestOf(stage: Stage, jobs: readonly RailJob[], now: Date, zone: string): string {
  if (stage === 'collected') return '';
  if (stage === 'booked') {
    const next = jobs.find((job) => new Date(job.arrivesAt) >= now);
    return next ? `next ${shortWhen(next.arrivesAt, now, zone)}` : '';
  }
  const oldest = jobs[0];
  return oldest ? `oldest ${ageWords(oldest.stageSince, now)}` : '';
}

/** Longest in its stage first; what is booked hangs in order of arrival. */
export function inOrder(stage: Stage, jobs: readonly RailJob[]): RailJob[] {
  const key = (job: RailJob): number =>
    new Date(stage === 'booked' ? job.arrivesAt : job.stageSince).getTime();
  return jobs.filter((job) => job.stage === stage).sort((a, b) => key(a) - key(b));
}
