/**
 * Which of a job's events still stand. An undone move is taken back; a correction takes back all moves since the job
 * last stood at the stage it is put back to, or before it. Moves taken back void their signed lines.
 */
import { PROGRESS, type Stage } from './stages';

export interface EventLike {
  id: string;
  kind: string;
  toStage: Stage | null;
  undoesEventId: string | null;
}

export interface Standing<E> {
  /** The events that lead to the present stage, oldest first; the last one says where the job stands. */
  standing: E[];
  undone: Set<string>;
  /** Moves taken back by a correction, by id, each with the correction that did. */
  corrected: Map<string, E>;
}

/** Folds a job's events, given in order. Events that move nothing (a replaced tag) are passed over. */
export function foldEvents<E extends EventLike>(events: readonly E[]): Standing<E> {
  const standing: E[] = [];
  const undone = new Set<string>();
  const corrected = new Map<string, E>();
  for (const event of events) {
    if (event.kind === 'undone') {
      const index = standing.findIndex((earlier) => earlier.id === event.undoesEventId);
      if (index >= 0) standing.splice(index, 1);
      if (event.undoesEventId) undone.add(event.undoesEventId);
    } else if (event.kind === 'corrected') {
      const taken = takenBack(standing, event.toStage);
      for (const { id } of taken) corrected.set(id, event);
      standing.length -= taken.length;
      standing.push(event);
    } else if (event.kind === 'booked' || event.kind === 'moved') {
      standing.push(event);
    }
  }
  return { standing, undone, corrected };
}

/**
 * The standing events that a correction back to `stage` takes back: those after the job last stood there; where it
 * never did, those after it last stood at a stage before that one.
 */
export function takenBack<E extends EventLike>(standing: readonly E[], stage: Stage | null): E[] {
  const stood = standing.findLastIndex((event) => event.toStage === stage);
  const last = stood >= 0 ? stood : standing.findLastIndex((event) => isBefore(event.toStage, stage));
  // The booking itself is never taken back.
  return standing.slice(Math.max(last, 0) + 1);
}

function isBefore(one: Stage | null, other: Stage | null): boolean {
  return one !== null && other !== null && PROGRESS.indexOf(one) < PROGRESS.indexOf(other);
}

/**
 * Whether a job stands where that event put it: the event is the last word, or corrections have put the job back to it.
 */
export function standsAt<E extends EventLike>(standing: readonly E[], eventId: string | null): boolean {
  for (const [index, event] of [...standing.entries()].reverse()) {
    if (event.id === eventId) return true;
    const isPutBack = event.kind === 'corrected' && standing[index - 1]?.toStage === event.toStage;
    if (!isPutBack) return false;
  }
  return false;
}
