import { randomId } from '@/lib/randomId';

/**
 * Idempotency keys by intent: the same act with the same content keeps its key for every try, so that an answer lost
 * on the way is replayed and never acted on twice; changed content is another intent. `done` ends the intent: the
 * same content sent again after it is meant again.
 */
export function useIntentKey() {
  let last = { intent: '', key: '' };
  function keyFor(intent: unknown): string {
    const text = JSON.stringify(intent);
    if (text !== last.intent) last = { intent: text, key: randomId() };
    return last.key;
  }
  function done(): void {
    last = { intent: '', key: '' };
  }
  return { keyFor, done };
}
