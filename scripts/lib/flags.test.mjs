import { expect, test } from 'vitest';
import { parseFlags } from './flags.mjs';

test('nothing asked for', () => {
  expect(parseFlags([])).toEqual({ dev: false, at: undefined, host: undefined, fakes: true });
});

test('all of them', () => {
  const args = ['--at', '09:30', '--host', '0.0.0.0', '--no-fakes', '--dev'];
  expect(parseFlags(args)).toEqual({ dev: true, at: '09:30', host: '0.0.0.0', fakes: false });
});

test.each([['--at', '25:00'], ['--at', '9:30'], ['--unknown'], ['stray']])(
  '%s %s is answered with the usage',
  (...args) => {
    expect(() => parseFlags(args)).toThrow(/npm start -- /);
  },
);
