import { expect } from '@playwright/test';
import { clock } from './addresses';

/** Processes ask the clock four times a second. */
const TAKEN_UP_MS = 700;

/** The time by the run's clock. */
export async function shopNow(): Promise<Date> {
  const answer = await fetch(clock);
  const { now } = (await answer.json()) as { now: string };
  return new Date(now);
}

/** Sets the run's clock forward to an instant, and waits until every process goes by it. */
export async function setShopClock(to: Date): Promise<void> {
  expect(to.getTime(), 'the clock never goes back').toBeGreaterThan((await shopNow()).getTime());
  await fetch(clock, {
    method: 'PUT',
    headers: { 'Content-Type': 'application/json' },
    body: JSON.stringify({ now: to.toISOString() }),
  });
  await new Promise((resolve) => setTimeout(resolve, TAKEN_UP_MS));
}

/** Lets time go by. */
export async function letPass(seconds: number): Promise<void> {
  await setShopClock(new Date((await shopNow()).getTime() + seconds * 1000));
}
