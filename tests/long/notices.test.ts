/** The run of tests/faults/notices.test.ts, longer: five times the kills. */
import { expect, test } from 'vitest';
import { killRun } from '../faults/support/killRun';

const times = (count: number, value: number): number[] => Array.from({ length: count }, () => value);

test('1,000 changes, 50 kills: one text for each visit and person', async () => {
  const report = await killRun({ changes: 1_000, placed: 30, workerKills: 10, webKills: 10 });
  process.stdout.write(
    `1,000 changes in ${report.runSeconds.toFixed(0)} s, slowest text ${report.slowestSeconds.toFixed(0)} s after its release\n`,
  );
  expect(report.kills).toEqual({ placed: 30, worker: 10, web: 10 });
  expect(report.movesPerJob).toEqual(times(1_000, 1));
  expect(report.textsPerVisit).toEqual(times(1_000, 1));
  expect(report.strayTexts).toBe(0);
  expect(report.uncertain).toBeGreaterThanOrEqual(30);
  expect(report.ends).toEqual({ accepted: 1_000 });
});
