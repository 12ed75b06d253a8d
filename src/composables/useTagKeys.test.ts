import { describe, expect, it } from 'vitest';
import { useTagKeys } from './useTagKeys';

function keyboard(rails: string[][]) {
  const seen: string[] = [];
  const keys = useTagKeys(rails, (id) => seen.push(id));
  const press = (...names: string[]) => {
    for (const key of names) keys.onKeydown(new KeyboardEvent('keydown', { key }));
    return seen.at(-1);
  };
  return { keys, press, seen };
}

describe('the keyboard on the Rail', () => {
  const rails = [['a1', 'a2', 'a3'], [], ['c1'], ['d1', 'd2']];

  it('starts at the first tag there is', () => {
    expect(keyboard(rails).keys.stop.value).toBe('a1');
    expect(keyboard([[], []]).keys.stop.value).toBeNull();
  });

  it('goes along a rail and stops at its ends', () => {
    const { press, seen } = keyboard(rails);
    expect(press('ArrowRight', 'ArrowRight')).toBe('a3');
    press('ArrowRight');
    expect(seen).toHaveLength(2);
    expect(press('Home')).toBe('a1');
    expect(press('End')).toBe('a3');
  });

  it('goes from rail to rail, past empty ones, to the nearest tag', () => {
    const { press } = keyboard(rails);
    expect(press('End', 'ArrowDown')).toBe('c1');
    expect(press('ArrowDown', 'ArrowRight', 'ArrowUp')).toBe('c1');
  });

  it('leaves other keys alone', () => {
    const { press } = keyboard(rails);
    expect(press('Tab')).toBeUndefined();
  });
});
