import { expect, it } from 'vitest';
import { useIntentKey } from './useIntentKey';

it('keeps the key of one intent through every try, and draws another for other content or after it is done', () => {
  const { keyFor, done } = useIntentKey();
  const first = keyFor({ to: 'ready' });
  expect(first.length).toBeGreaterThanOrEqual(16);
  expect(keyFor({ to: 'ready' })).toBe(first);
  const other = keyFor({ to: 'repair' });
  expect(other).not.toBe(first);
  done();
  expect(keyFor({ to: 'repair' })).not.toBe(other);
});
