import { describe, expect, it } from 'vitest';
import { translate } from './translate';

const words = {
  stub: {
    machines: '{n} machine | {n} machines',
    mail: "write to shop{'@'}example.com",
    head: { ready: '{count} ready.' },
  },
};

describe('translate', () => {
  it('fills places in', () => {
    expect(translate(words, 'stub.head.ready', { count: 'One', n: 1 })).toBe('One ready.');
  });

  it.each([
    [0, '0 machines'],
    [1, '1 machine'],
    [2, '2 machines'],
  ])('picks the form for %i', (n, said) => {
    expect(translate(words, 'stub.machines', { n })).toBe(said);
  });

  it('reads escaped characters', () => {
    expect(translate(words, 'stub.mail')).toBe('write to shop@example.com');
  });

  it('shows the key where words are missing', () => {
    expect(translate(words, 'stub.head.nothing')).toBe('stub.head.nothing');
  });
});
