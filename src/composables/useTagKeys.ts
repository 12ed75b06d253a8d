import { computed, ref, toValue, type MaybeRefOrGetter } from 'vue';

const STEPS: Record<string, [rails: number, tags: number]> = {
  ArrowLeft: [0, -1],
  ArrowRight: [0, 1],
  ArrowUp: [-1, 0],
  ArrowDown: [1, 0],
};

/**
 * The keyboard on the Rail: arrow keys go along a rail and from rail to rail, from the tag that has it (`stop`).
 * @param rails ids of the tags, rail by rail
 * @param focus puts the keyboard on a tag
 */
export function useTagKeys(rails: MaybeRefOrGetter<string[][]>, focus: (id: string) => void) {
  const last = ref<string | null>(null);
  const filled = computed(() => toValue(rails).filter((rail) => rail.length > 0));
  const stop = computed(() => {
    const all = filled.value.flat();
    return last.value && all.includes(last.value) ? last.value : (all[0] ?? null);
  });

  function target(key: string): string | undefined {
    const row = filled.value.findIndex((rail) => rail.includes(stop.value ?? ''));
    const rail = filled.value[row];
    if (!rail) return undefined;
    if (key === 'Home') return rail[0];
    if (key === 'End') return rail.at(-1);
    const step = STEPS[key];
    if (!step) return undefined;
    const column = rail.indexOf(stop.value ?? '') + step[1];
    const next = filled.value[row + step[0]];
    return next?.[step[0] === 0 ? column : Math.min(column, next.length - 1)];
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
