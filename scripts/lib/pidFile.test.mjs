import { expect, test } from 'vitest';
import { parsePidFile, pidFileVerdict } from './pidFile.mjs';

// The lines as PostgreSQL's documentation on the data directory's postmaster.pid lists them.
const text = '4711\n/var/lib/x/data\n1796134000\n21345\n\n127.0.0.1\n  5432001         3\nready   \n';

test('reads pid, port and readiness', () => {
  expect(parsePidFile(text)).toEqual({ pid: 4711, port: 21345, ready: true });
  expect(parsePidFile(text.replace('ready   ', 'starting'))).toMatchObject({ ready: false });
});

test.each(['', 'abc\n', '-3\n', '0\n'])('%j is no pid file', (broken) => {
  expect(parsePidFile(broken)).toBeUndefined();
});

test.each([
  [undefined, 'stale', 'nobody has the number'],
  [{ state: 'Z', cwd: undefined }, 'dying', 'killed, not reaped yet'],
  [{ state: 'S', cwd: '/home/other' }, 'stale', 'the number was given to a stranger'],
  [{ state: 'S', cwd: '/data' }, 'running', 'it is the server'],
])('%j means %s: %s', (process, verdict) => {
  expect(pidFileVerdict(process, '/data')).toBe(verdict);
});
