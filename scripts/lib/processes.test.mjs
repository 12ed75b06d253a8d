import { spawn } from 'node:child_process';
import { mkdtempSync, rmSync, symlinkSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { endProcess, identify, isAlive, readProcess } from './processes.mjs';

test('a process is known by its number and its start', () => {
  const self = identify();
  expect(isAlive(self)).toBe(true);
  expect(isAlive({ ...self, startTime: '1' })).toBe(false);
});

test('a zombie has ended', () => {
  const zombie = () => ({ state: 'Z', startTime: '5' });
  expect(isAlive({ pid: 7, startTime: '5' }, zombie)).toBe(false);
});

test('reads a process whose name holds brackets and blanks', async () => {
  const folder = mkdtempSync(join(tmpdir(), 'benchbell-'));
  const program = join(folder, 'x) R 1 (y');
  symlinkSync('/usr/bin/sleep', program);
  const child = spawn(program, ['30'], { detached: true, cwd: folder });
  await new Promise((resolve) => child.once('spawn', resolve));
  const found = readProcess(child.pid);
  expect(found).toMatchObject({ pid: child.pid, cwd: folder, command: `${program} 30` });
  expect(Number(found.startTime)).toBeGreaterThanOrEqual(Number(identify().startTime));
  await endProcess(identify(child.pid));
  rmSync(folder, { recursive: true });
});

test('ends a process that does not listen to the first signal', async () => {
  const child = spawn('sh', ['-c', 'trap "" TERM; echo up; while :; do sleep 0.1; done'], { detached: true });
  await new Promise((resolve) => child.stdout.once('data', resolve));
  const identity = identify(child.pid);
  await endProcess(identity, 200);
  expect(isAlive(identity)).toBe(false);
});

test('leaves a stranger with the same number alone', async () => {
  const child = spawn('sleep', ['30'], { detached: true });
  const identity = identify(child.pid);
  await endProcess({ ...identity, startTime: '1' }, 100);
  expect(isAlive(identity)).toBe(true);
  await endProcess(identity);
});
