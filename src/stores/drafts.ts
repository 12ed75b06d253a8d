import { defineStore } from 'pinia';
import { watch } from 'vue';
import { useSessionStore } from './session';

interface Draft {
  by: string | undefined;
  value: unknown;
}

/**
 * What was typed on the shop floor and not sent yet. A session that ends in the middle, or a look at another page,
 * costs no word of it: who comes back to the same form finds it filled. In memory only, and for its writer only.
 */
export const useDraftsStore = defineStore('drafts', () => {
  const drafts = new Map<string, Draft>();
  const session = useSessionStore();

  const nameOf = (about: string, form: string): string => `${about} ${form}`;

  /**
   * Fills a form with what was typed before, and keeps what is typed from now on.
   * @param about the job the words are about; `drop` forgets by it
   * @param form which of its forms
   * @param read what the form holds, as plain values
   * @param fill puts kept values back into the form
   */
  function keep<Value>(about: string, form: string, read: () => Value, fill: (value: Value) => void): void {
    const name = nameOf(about, form);
    const by = session.person?.id;
    const before = drafts.get(name);
    if (before && before.by === by) fill(before.value as Value);
    watch(read, (value) => drafts.set(name, { by, value }), { deep: true });
  }

  /** Forgets what was typed about a job: it was sent, or given up. */
  function drop(about: string, form = ''): void {
    for (const name of drafts.keys()) if (name.startsWith(nameOf(about, form))) drafts.delete(name);
  }

  return { keep, drop };
});
