import { describe, expect, it } from 'vitest';
import { useTagKeys } from './useTagKeys';

function keyboard(rails: string[][], across: number | null = null) {
  const seen: string[] = [];
  const keys = useTagKeys(rails, (id) => seen.push(id), across);
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

  it('goes from row to row where a rail hangs in several, and along it across their ends', () => {
    const { press } = keyboard([['a1', 'a2', 'a3', 'a4', 'a5'], ['b1']], 3);
    expect(press('ArrowDown')).toBe('a4');
    expect(press('ArrowRight', 'ArrowDown')).toBe('b1');
    expect(press('ArrowUp', 'ArrowUp', 'ArrowRight', 'ArrowRight', 'ArrowRight')).toBe('a4');
    expect(press('End')).toBe('a5');
  });

  it('leaves other keys alone', () => {
    const { press } = keyboard(rails);
    expect(press('Tab')).toBeUndefined();
  });
});
