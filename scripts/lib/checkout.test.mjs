import { expect, test } from 'vitest';
import { clusterHomeFor, hashOfPath } from './checkout.mjs';

test('a checkout is named by the SHA-256 of its path', () => {
  // FIPS 180-2, appendix B.1: SHA-256 of "abc" begins with ba7816bf 8f01cfea.
  expect(hashOfPath('abc')).toBe('ba7816bf8f');
});

test('two checkouts never share a cluster', () => {
  const home = (path) => clusterHomeFor({ isRoot: true, hash: hashOfPath(path) });
  expect(home('/srv/one')).not.toBe(home('/srv/two'));
});

test('an ordinary account keeps its cluster with its own state', () => {
  const where = { isRoot: false, hash: '0123456789', home: '/home/dana' };
  expect(clusterHomeFor(where)).toBe('/home/dana/.local/state/benchbell-0123456789');
  expect(clusterHomeFor({ ...where, stateHome: '/state' })).toBe('/state/benchbell-0123456789');
});
