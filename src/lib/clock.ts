import { onScopeDispose, readonly, shallowRef, type Ref } from 'vue';

/** How far the server's clock is ahead of this device's, in milliseconds. The only reader of the device's clock. */
let offset = 0;

/** Takes the server's time from an answer; every answer with a `now` calls this. */
export function setServerNow(iso: string): void {
  const at = Date.parse(iso);
  if (!Number.isNaN(at)) offset = at - Date.now();
}

/** The server's time. */
export function now(): Date {
  return new Date(Date.now() + offset);
}

/**
 * The server's time as a ticking ref; stops with its scope.
 * @param everyMs default 1000
 */
export function useNow(everyMs = 1000): Readonly<Ref<Date>> {
  const value = shallowRef(now());
  const timer = setInterval(() => (value.value = now()), everyMs);
  onScopeDispose(() => clearInterval(timer));
  return readonly(value);
}
