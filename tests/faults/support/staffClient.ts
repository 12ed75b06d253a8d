/** A member of staff at the counter, over HTTP, who tries again under the same key when the server has died. */
import { randomUUID } from 'node:crypto';
import { setTimeout as wait } from 'node:timers/promises';
import { PASSWORD } from '../../support/testApp';
import type { TestShop } from '../../support/factories';

const TRIES = 100;
const headers = { 'Content-Type': 'application/json', 'Sec-Fetch-Site': 'same-origin' };

/** Sends until an answer comes that is not the server's own trouble. */
async function send(url: string, init: RequestInit): Promise<Response> {
  for (let tries = 0; tries < TRIES; tries += 1) {
    try {
      const answer = await fetch(url, { ...init, signal: AbortSignal.timeout(15_000) });
      if (answer.status < 500) return answer;
    } catch {
      // Killed while it answered, or not up yet.
    }
    await wait(300);
  }
  throw new Error(`no answer from ${url}`);
}

/** Signs in at the counter. @returns checks a machine in, and resolves when the server has said that it is done */
export async function counterOf(web: string, shop: TestShop): Promise<(tag: string) => Promise<void>> {
  const { email } = shop.staff.counter;
  const body = JSON.stringify({ email, password: PASSWORD });
  const signedIn = await send(`${web}/api/shops/${shop.slug}/sign-in/password`, {
    method: 'POST',
    headers,
    body,
  });
  if (signedIn.status !== 200) throw new Error(`sign-in: ${signedIn.status} ${await signedIn.text()}`);
  const cookie = signedIn.headers
    .getSetCookie()
    .map((each) => each.split(';')[0])
    .join('; ');
  return async (tag) => {
    const checkIn = { broughtByName: 'Ray', tankBled: true, fuelOff: true, leftWithIt: '' };
    const answer = await send(`${web}/api/shop/jobs/${tag}/moves`, {
      method: 'POST',
      headers: { ...headers, cookie, 'Idempotency-Key': `check-in-${randomUUID()}` },
      body: JSON.stringify({ version: 1, to: 'checked_in', checkIn }),
    });
    if (answer.status !== 200) throw new Error(`check-in: ${answer.status} ${await answer.text()}`);
  };
}
