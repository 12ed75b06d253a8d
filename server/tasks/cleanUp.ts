/** Hourly: what has served its time is thrown away. Goes through the shops one by one, as every task does. */
import type { Services } from '#server/lib/context';
import { rows, run, withShop } from '#server/lib/db';

const HOUR_MS = 60 * 60_000;
const KEYS_KEPT_MS = 48 * HOUR_MS;
const CODES_KEPT_MS = 24 * HOUR_MS;

/** Removes expired idempotency keys, one-time codes, sessions and rate limits. */
export async function cleanUp({ clock }: Pick<Services, 'clock'>): Promise<void> {
  const now = clock.now().getTime();
  const shops = await rows<{ id: string }>('select id from shops');
  for (const { id } of shops) {
    await withShop(id, async () => {
      const keysBefore = new Date(now - KEYS_KEPT_MS);
      await run('delete from idempotency_keys where created_at < $1 returning id', [keysBefore]);
      await run('delete from login_codes where expires_at < $1 returning id', [
        new Date(now - CODES_KEPT_MS),
      ]);
    });
  }
  // These two are stamped by libraries with the machine's time, so they are measured by it.
  await run('delete from session where expire < clock_timestamp() returning sid');
  await run(
    'delete from rate_limits where expire < extract(epoch from clock_timestamp()) * 1000 returning key',
  );
}
