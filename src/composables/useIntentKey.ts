import { randomId } from '@/lib/randomId';

/**
 * Idempotency keys by intent: the same act with the same content keeps its key for every try, so that an answer lost
 * on the way is replayed and never acted on twice; changed content is another intent.
 */
export function useIntentKey(): (intent: unknown) => string {
  let last = { intent: '', key: '' };
  return (intent) => {
    const text = JSON.stringify(intent);
    if (text !== last.intent) last = { intent: text, key: randomId() };
    return last.key;
  };
}
