import { createServer } from 'node:net';
import { expect, test } from 'vitest';
import { canListen, nextFreePort, randomFreePort } from './ports.mjs';

test('a port in use is passed over', async () => {
  const server = createServer();
  await new Promise((resolve) => server.listen(0, '127.0.0.1', resolve));
  const { port } = server.address();
  expect(await canListen(port)).toBe(false);
  expect(await nextFreePort(port)).toBeGreaterThan(port);
  await new Promise((resolve) => server.close(resolve));
  expect(await canListen(port)).toBe(true);
});

test('a port that is promised already is passed over', async () => {
  const free = () => true;
  expect(await nextFreePort(5180, { taken: [5180, 5181], free })).toBe(5182);
});

test('says what to do when everything is taken', async () => {
  await expect(nextFreePort(5180, { free: () => false })).rejects.toThrow(/set PORT/);
});

test('never chooses 5432 or a port for outgoing connections', async () => {
  const port = await randomFreePort();
  expect(port).toBeGreaterThanOrEqual(20_000);
  expect(port).toBeLessThan(32_000);
});
