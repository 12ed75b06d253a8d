import { setTimeout as sleep } from 'node:timers/promises';

/** Runs an act and settles no sooner than after `ms`, so that its time does not tell which way it went. */
export async function takeAtLeast<T>(ms: number, act: () => Promise<T>): Promise<T> {
  const [outcome] = await Promise.allSettled([act(), sleep(ms)]);
  if (outcome.status === 'rejected') throw outcome.reason;
  return outcome.value;
}
