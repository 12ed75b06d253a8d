/** Killed at any moment, even between the gateway's "taken" and our own record of it, each text goes out once. */
import { expect, test } from 'vitest';
import { killRun } from './support/killRun';

const times = (count: number, value: number): number[] => Array.from({ length: count }, () => value);

test('400 changes, 10 kills: one text for each visit and person', async () => {
  const report = await killRun({ changes: 400, placed: 6, workerKills: 2, webKills: 2 });
  process.stdout.write(
    `400 changes in ${report.runSeconds.toFixed(0)} s, slowest text ${report.slowestSeconds.toFixed(0)} s after its release\n`,
  );
  expect(report.kills).toEqual({ placed: 6, worker: 2, web: 2 });
  expect(report.movesPerJob).toEqual(times(400, 1));
  expect(report.textsPerVisit).toEqual(times(400, 1));
  expect(report.strayTexts).toBe(0);
  // Each placed kill left at least the text of which the gateway had just spoken.
  expect(report.uncertain).toBeGreaterThanOrEqual(6);
  expect(report.ends).toEqual({ accepted: 400 });
  expect(report.slowestSeconds).toBeLessThanOrEqual(90);
});

test('without the look-up the same kills text somebody twice, and this run sees it', async () => {
  const workerFile = 'tests/faults/support/blindWorker.ts';
  const report = await killRun({ changes: 60, placed: 4, workerKills: 0, webKills: 0, workerFile });
  expect(report.kills.placed).toBe(4);
  expect(report.textsPerVisit.every((count) => count >= 1)).toBe(true);
  expect(report.textsPerVisit.filter((count) => count > 1).length).toBeGreaterThanOrEqual(1);
});
