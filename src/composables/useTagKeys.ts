import { computed, ref, toValue, type MaybeRefOrGetter } from 'vue';

const STEPS: Record<string, [rails: number, tags: number]> = {
  ArrowLeft: [0, -1],
  ArrowRight: [0, 1],
  ArrowUp: [-1, 0],
  ArrowDown: [1, 0],
};

/**
 * The keyboard on the Rail: arrow keys go along a rail and from rail to rail, from the tag that has it (`stop`).
 * Where a rail hangs in several rows, up and down go from row to row.
 * @param rails ids of the tags, rail by rail
 * @param focus puts the keyboard on a tag
 * @param across tags in a row; null where each rail is one row
 */
export function useTagKeys(
  rails: MaybeRefOrGetter<string[][]>,
  focus: (id: string) => void,
  across: MaybeRefOrGetter<number | null> = null,
) {
  const last = ref<string | null>(null);
  const filled = computed(() => toValue(rails).filter((rail) => rail.length > 0));
  const stop = computed(() => {
    const all = filled.value.flat();
    return last.value && all.includes(last.value) ? last.value : (all[0] ?? null);
  });

  function target(key: string): string | undefined {
    const here = stop.value ?? '';
    const rail = filled.value.find((ids) => ids.includes(here));
    if (!rail) return undefined;
    if (key === 'Home') return rail[0];
    if (key === 'End') return rail.at(-1);
    const step = STEPS[key];
    if (!step) return undefined;
    return step[0] === 0 ? rail[rail.indexOf(here) + step[1]] : besides(here, step[0]);
  }

  /** The tag over or under, or the last one of a shorter row. */
  function besides(here: string, step: number): string | undefined {
    const rows = filled.value.flatMap((rail) => rowsOf(rail, toValue(across)));
    const at = rows.findIndex((row) => row.includes(here));
    const next = rows[at + step];
    return next?.[Math.min(rows[at]?.indexOf(here) ?? 0, next.length - 1)];
  }

  function onKeydown(event: KeyboardEvent): void {
    const id = target(event.key);
    if (!id) return;
    event.preventDefault();
    last.value = id;
    focus(id);
  }

  return { stop, onKeydown, focused: (id: string) => (last.value = id) };
}

function rowsOf(rail: string[], across: number | null): string[][] {
  if (across === null) return [rail];
  const rows = Math.ceil(rail.length / across);
  return Array.from({ length: rows }, (_, row) => rail.slice(row * across, (row + 1) * across));
}
