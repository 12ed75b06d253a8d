/**
 * Whether a notice is still true when its message is about to go. The public reads events from their `visible_at`
 * on; a newer move that is still in its grace makes a notice wait until it is known which of the two holds. Pure.
 */
import { foldEvents, standsAt, type EventLike } from '#shared/domain/standing';
import { IN_SHOP } from '#shared/domain/stages';
import type { NoticeKind } from '#server/models/Notice';

export interface TimedEvent extends EventLike {
  at: Date;
  visibleAt: Date;
}

/** One job's events, as they stand now and as the public may know them. */
export interface JobState {
  undone: Set<string>;
  /** Standing events, oldest first. */
  standing: TimedEvent[];
  /** Those of them that the public knows. */
  public: TimedEvent[];
}

/** Folds a job's events, given in order. */
export function jobStateAt(events: readonly TimedEvent[], now: Date): JobState {
  const { standing, undone, corrected } = foldEvents(events);
  const isKnown = ({ id, visibleAt }: TimedEvent): boolean => {
    const correction = corrected.get(id);
    // What was corrected within its grace has never been seen, as if it had been undone.
    return visibleAt <= now && !(correction && correction.at < visibleAt);
  };
  return { undone, standing, public: foldEvents(events.filter(isKnown)).standing };
}

export interface NoticeFacts {
  kind: NoticeKind;
  jobEventId: string | null;
}

export type Verdict = 'stands' | 'overtaken' | 'withdrawn' | { waitsUntil: Date };

/** Judges a notice about one job. */
export function judgeJobNotice({ kind, jobEventId }: NoticeFacts, job: JobState): Verdict {
  if (jobEventId && job.undone.has(jobEventId)) return 'withdrawn';
  if (kind === 'checked_in') return isHereSince(job, jobEventId) ? 'stands' : 'overtaken';
  const isSoon = standsAt(job.standing, jobEventId);
  const isKnown = standsAt(job.public, jobEventId);
  if (isSoon && isKnown) return 'stands';
  const last = job.standing.at(-1);
  return last && (isSoon || isKnown) ? { waitsUntil: last.visibleAt } : 'overtaken';
}

/** A booking is told as long as the public knows of a machine that is not cancelled. */
export function judgeBooking(jobs: readonly JobState[]): Verdict {
  const isOff = jobs.every((job) => job.public.at(-1)?.toStage === 'cancelled');
  return isOff ? 'overtaken' : 'stands';
}

/** Checked in by that event and still on the way: neither ready, nor gone, nor put back to the booking. */
function isHereSince(job: JobState, jobEventId: string | null): boolean {
  const stage = job.public.at(-1)?.toStage;
  const isIn = stage !== undefined && stage !== null && stage !== 'ready' && IN_SHOP.includes(stage);
  return isIn && job.public.some(({ id }) => id === jobEventId);
}
