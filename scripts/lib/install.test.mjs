import { expect, test } from 'vitest';
import { isInstalled } from './install.mjs';
import { nodeComplaint } from './node.mjs';

const wanted = {
  packages: {
    '': { name: 'benchbell' },
    'node_modules/a': { version: '1.0.0' },
    'node_modules/other-platform': { version: '2.0.0', optional: true },
  },
};

test.each([
  ['nothing was installed', undefined, false],
  ['all is there', { 'node_modules/a': { version: '1.0.0' } }, true],
  ['a package has another version', { 'node_modules/a': { version: '1.0.1' } }, false],
  ['a package is missing', {}, false],
  [
    'an optional package has another version',
    { 'node_modules/a': { version: '1.0.0' }, 'node_modules/other-platform': { version: '1.9.0' } },
    false,
  ],
])('%s', (_case, packages, expected) => {
  expect(isInstalled(wanted, packages && { packages })).toBe(expected);
});

test.each(['20.19.0', '20.20.2'])('Node.js %s does', (version) => {
  expect(nodeComplaint(version)).toBeUndefined();
});

test.each(['18.20.4', '20.18.1', '22.12.0'])('Node.js %s is refused in one sentence', (version) => {
  expect(nodeComplaint(version)).toMatch(/^Benchbell runs on Node\.js 20 .*install Node\.js 20.*\.$/);
});
