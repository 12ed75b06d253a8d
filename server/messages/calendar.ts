/** The calendar file of a visit: an announcement, so METHOD:PUBLISH; times in UTC, which every reader places right. */
import { createHash } from 'node:crypto';
import ical, { ICalCalendarMethod, ICalEventStatus } from 'ical-generator';

const VISIT_MINUTES = 30;

export interface CalendarFacts {
  visitId: string;
  /** Host of our own sender address: makes the event's id unique in the world. */
  host: string;
  startsAt: Date;
  /** When the file was made. */
  stamp: Date;
  /** Rises with each change of the visit, so that a newer file replaces an older one. */
  sequence: number;
  isCancelled: boolean;
  summary: string;
  description: string;
  location: string;
}

/** Writes the file. The same visit always has the same UID. */
export function calendarFile(facts: CalendarFacts): string {
  const { startsAt, stamp, sequence, isCancelled, summary, description, location } = facts;
  const calendar = ical({
    method: ICalCalendarMethod.PUBLISH,
    prodId: { company: 'Benchbell', product: 'Benchbell' },
  });
  calendar.createEvent({
    id: `${uidOf(facts.visitId)}@${facts.host}`,
    start: startsAt,
    end: new Date(startsAt.getTime() + VISIT_MINUTES * 60_000),
    stamp,
    sequence,
    status: isCancelled ? ICalEventStatus.CANCELLED : ICalEventStatus.CONFIRMED,
    summary,
    description,
    location,
  });
  return calendar.toString();
}

/** The visit's own id stays with us: an address in a calendar travels far. */
function uidOf(visitId: string): string {
  return createHash('sha256').update(`visit ${visitId}`).digest('hex').slice(0, 32);
}
