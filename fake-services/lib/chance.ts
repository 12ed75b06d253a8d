/** A repeatable stream of numbers in [0, 1): the same seed gives the same run of faults (mulberry32). */
export function seededChance(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296;
  };
}

/** One number is itself; a pair is anything between, evenly. */
export type Range = number | [min: number, max: number];

/** Draws from a range, whole milliseconds. */
export function drawFrom(range: Range, chance: () => number): number {
  if (typeof range === 'number') return range;
  return Math.round(range[0] + (range[1] - range[0]) * chance());
}
