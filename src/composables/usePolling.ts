import { onScopeDispose } from 'vue';

/**
 * Reads again at an interval while the page is seen, and at once when it is seen again.
 * @param read called without overlap: a slow answer delays the next read
 * @param everyMs default 5000
 */
export function usePolling(read: () => Promise<unknown>, everyMs = 5_000): void {
  let isReading = false;
  async function tick(): Promise<void> {
    if (isReading || document.visibilityState !== 'visible') return;
    isReading = true;
    // The query keeps its own error, and the screen shows it.
    await read().catch(() => undefined);
    isReading = false;
  }
  const again = () => void tick();
  const timer = setInterval(again, everyMs);
  document.addEventListener('visibilitychange', again);
  window.addEventListener('focus', again);
  onScopeDispose(() => {
    clearInterval(timer);
    document.removeEventListener('visibilitychange', again);
    window.removeEventListener('focus', again);
  });
}
