import { expect, test } from 'vitest';
import { countPlaywright, countVitest, withExitCode } from './stages.mjs';

test('a test file that could not be loaded counts as failed', () => {
  const testResults = [
    { status: 'failed', assertionResults: [] },
    { status: 'failed', assertionResults: [{}] },
    { status: 'passed', assertionResults: [{}] },
  ];
  expect(countVitest({ numPassedTests: 1, numFailedTests: 1, testResults })).toEqual({
    passed: 1,
    failed: 2,
  });
});

test('a browser test that passed at a second try only has failed', () => {
  const stats = { expected: 4, unexpected: 1, flaky: 1 };
  expect(countPlaywright({ stats, errors: [] })).toEqual({ passed: 4, failed: 2 });
});

test('a program that failed without a failed test counts as one', () => {
  expect(withExitCode({ passed: 3, failed: 0 }, 1)).toEqual({ passed: 3, failed: 1 });
  expect(withExitCode({ passed: 3, failed: 2 }, 1)).toEqual({ passed: 3, failed: 2 });
  expect(withExitCode({ passed: 3, failed: 0 }, 0)).toEqual({ passed: 3, failed: 0 });
});
