import { useQueryCache } from '@pinia/colada';
import { ref, shallowRef } from 'vue';
import { ApiError } from '@/api/client';
import { FLOOR_KEY } from '@/queries/jobs';
import type { FieldProblem } from '#shared/errors';
import { useIntentKey } from './useIntentKey';

/**
 * One small write of a staff screen: sent once however often it is pressed, its error kept beside it, and the
 * screen read again after it.
 */
export function useWrite() {
  const cache = useQueryCache();
  const intent = useIntentKey();
  const isBusy = ref(false);
  const error = shallowRef<unknown>(null);
  const fields = shallowRef<FieldProblem[]>([]);

  /** @returns whether it went through */
  async function run(content: unknown, write: (key: string) => Promise<unknown>): Promise<boolean> {
    if (isBusy.value) return false;
    isBusy.value = true;
    error.value = null;
    fields.value = [];
    try {
      await write(intent.keyFor(content));
      intent.done();
      // The write stands, whatever becomes of the read after it; that keeps its own error.
      await cache.invalidateQueries({ key: [...FLOOR_KEY] }).catch(() => undefined);
      return true;
    } catch (failure) {
      error.value = failure;
      fields.value = failure instanceof ApiError ? failure.fields : [];
      return false;
    } finally {
      isBusy.value = false;
    }
  }

  const faultOf = (path: string) => fields.value.find((field) => field.path === path)?.message ?? '';
  return { isBusy, error, fields, faultOf, run };
}
