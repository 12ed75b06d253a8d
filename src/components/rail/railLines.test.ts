import { describe, expect, it } from 'vitest';
import type { RailJob } from '#shared/schemas/job';
import { acrossIn, linesOf } from './railLines';

const tags = (count: number) => Array.from({ length: count }, (_, at) => ({ id: `tag ${at}` }) as RailJob);
const hung = (count: number, free: number | null, across: number | null) =>
  linesOf(tags(count), free, across).map((line) => [line.jobs.length, line.pegs]);

describe('how the tags of one rail hang', () => {
  it('hangs below what does not fit beside, on steel that runs to the edge', () => {
    expect(hung(9, null, 5)).toEqual([
      [5, 5],
      [4, 5],
    ]);
    expect(hung(0, null, 5)).toEqual([[0, 5]]);
    expect(hung(5, null, 5)).toEqual([[5, 5]]);
  });

  it('keeps a limited rail as long as its pegs', () => {
    expect(hung(3, 1, 5)).toEqual([[3, 4]]);
    expect(hung(2, 2, 3)).toEqual([
      [2, 3],
      [0, 1],
    ]);
    expect(hung(7, 0, 5)).toEqual([
      [5, 5],
      [2, 2],
    ]);
  });

  it('runs on sideways on a phone', () => {
    expect(hung(9, null, null)).toEqual([[9, 9]]);
    expect(hung(2, null, null)).toEqual([[2, 5]]);
    expect(hung(3, 1, null)).toEqual([[3, 4]]);
  });

  it('loses no tag and keeps their order', () => {
    const all = linesOf(tags(11), null, 4).flatMap((line) => line.jobs.map((job) => job.id));
    expect(all).toEqual(tags(11).map((job) => job.id));
  });

  it.each([
    [0, 1],
    [400, 1],
    [632, 3],
    [1168, 5],
    [3000, 5],
  ])('in %i px hang %i side by side', (width, count) => expect(acrossIn(width)).toBe(count));
});
