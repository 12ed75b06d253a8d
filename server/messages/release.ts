/** When a message may go: the grace of the shop's own changes, the merge window, the recipient's quiet hours. Pure. */
import { afterQuietHours } from '#shared/domain/hours';

/** A person who acted this recently is awake, whatever the hour. */
const JUST_ACTED_MS = 15 * 60_000;
/** A message waits for later changes of the visit at most this many graces after its oldest notice. */
const GRACES_AT_MOST = 3;

export interface NoticeTimes {
  createdAt: Date;
  /** When its own grace ends. */
  releaseAt: Date;
}

export interface Recipient {
  /** The person's zone, else the account's, else the shop's. */
  zone: string;
  quiet: { from: string; to: string };
  lastActedAt: Date | null;
}

export type HeldFor = 'nothing' | 'grace' | 'quiet_hours';

/** When the youngest grace has ended, but no later than three graces after the oldest notice. */
export function releaseOf(notices: readonly NoticeTimes[], graceMs: number): Date {
  const youngest = Math.max(...notices.map(({ releaseAt }) => releaseAt.getTime()));
  const oldest = Math.min(...notices.map(({ createdAt }) => createdAt.getTime()));
  return new Date(Math.min(youngest, oldest + GRACES_AT_MOST * graceMs));
}

/** Shifts a release out of the recipient's quiet hours, unless that person has just acted. */
export function goesAt(
  release: Date,
  now: Date,
  { zone, quiet, lastActedAt }: Recipient,
): { notBefore: Date; heldFor: HeldFor } {
  const at = release > now ? release : now;
  const isAwake = lastActedAt !== null && at.getTime() - lastActedAt.getTime() <= JUST_ACTED_MS;
  const awakeAt = isAwake ? at : afterQuietHours(at, zone, quiet);
  if (awakeAt > at) return { notBefore: awakeAt, heldFor: 'quiet_hours' };
  return { notBefore: release, heldFor: release > now ? 'grace' : 'nothing' };
}
