/** How the tags of one rail hang: side by side as many as fit, the rest below from further steel. */
import type { RailJob } from '#shared/schemas/job';

/** One run of steel: its tags, and its pegs with those that are free. */
export interface RailLine {
  jobs: RailJob[];
  pegs: number;
}

/** An unlimited rail on a phone shows its steel so far. */
const BARE = 5;
/** Narrower than this a tag no longer holds a machine's name. */
const TAG_MIN = 200;
const GAP = 16;
/** More side by side leave too much steel bare on a usual day. */
const ACROSS_MAX = 5;

/** How many tags fit side by side in so many pixels. */
export function acrossIn(width: number): number {
  return Math.min(ACROSS_MAX, Math.max(1, Math.floor((width + GAP) / (TAG_MIN + GAP))));
}

/**
 * The tags of one rail, cut into what hangs side by side.
 * @param free pegs still free; null where room is not limited, and the steel runs on to the edge
 * @param across tags side by side; null where the rail runs on sideways
 */
export function linesOf(jobs: readonly RailJob[], free: number | null, across: number | null): RailLine[] {
  const pegs = pegsOf(jobs.length, free, across);
  const most = across ?? pegs;
  const lines: RailLine[] = [];
  for (let at = 0; at < pegs; at += most) {
    lines.push({ jobs: jobs.slice(at, at + most), pegs: Math.min(most, pegs - at) });
  }
  return lines;
}

function pegsOf(hung: number, free: number | null, across: number | null): number {
  if (free !== null) return Math.max(1, hung + free);
  if (across === null) return Math.max(BARE, hung);
  return Math.max(1, Math.ceil(hung / across)) * across;
}
