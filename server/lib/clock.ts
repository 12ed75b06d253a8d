/**
 * The one clock. Real time plus an offset; in development and tests the offset is asked of a clock address, so that
 * server, worker and fakes agree and a test can set the hour.
 */
export interface Clock {
  now(): Date;
  stop(): void;
}

const POLL_MS = 250;

async function readOffset(url: string): Promise<number> {
  const answer = await fetch(url, { signal: AbortSignal.timeout(2000) });
  const body = (await answer.json()) as { offsetMs: number };
  return body.offsetMs;
}

/** The clock of a process. Without an address, real time. */
export async function startClock(url: string | undefined): Promise<Clock> {
  if (!url) return { now: () => new Date(), stop: () => undefined };
  let offset = await readOffset(url);
  const timer = setInterval(() => {
    readOffset(url).then(
      (ms) => (offset = ms),
      () => undefined, // The address is away for a moment: the last offset holds.
    );
  }, POLL_MS);
  timer.unref();
  return { now: () => new Date(Date.now() + offset), stop: () => clearInterval(timer) };
}

/** A clock that stands where it is put, for tests. */
export function manualClock(start: Date): Clock & { set(at: Date): void } {
  let at = start;
  return { now: () => new Date(at), set: (next) => (at = next), stop: () => undefined };
}
