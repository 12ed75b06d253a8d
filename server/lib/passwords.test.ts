import { expect, test } from 'vitest';
import { fitsPassword, hashPassword } from './passwords';

// OWASP Password Storage Cheat Sheet: Argon2id with m=19456 (19 MiB), t=2, p=1.
test('hashes by Argon2id with a published set of parameters', async () => {
  expect(await hashPassword('seven paper kites over town')).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
});

test('fits the very password and no other, and never without a hash', async () => {
  const kept = await hashPassword('seven paper kites over town');
  expect(await fitsPassword('seven paper kites over town', kept)).toBe(true);
  expect(await fitsPassword('Seven paper kites over town', kept)).toBe(false);
  expect(await fitsPassword('seven paper kites over town ', kept)).toBe(false);
  expect(await fitsPassword('seven paper kites over town', null)).toBe(false);
});
