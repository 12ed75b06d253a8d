import { onScopeDispose, shallowRef, type Ref } from 'vue';

/** True once it has taken longer than a blink: only then is it worth saying that something loads. */
export function useLate(afterMs = 300): Readonly<Ref<boolean>> {
  const isLate = shallowRef(false);
  const timer = setTimeout(() => (isLate.value = true), afterMs);
  onScopeDispose(() => clearTimeout(timer));
  return isLate;
}
