/**
 * Each second, what is due is queued. Reads over the owner's pool, as it looks at all shops; everything else happens
 * in each shop's own unit of work.
 */
import type { Pool } from 'pg';
import type { Services } from '#server/lib/context';
import { run, withShop } from '#server/lib/db';
import { enqueueMessages } from '#server/lib/queue';
import { IS_DEAD } from '#server/messages/liveWorkers';

const BATCH = 500;
/** A task that has not been heard of for this long is taken to be lost. */
const REQUEUE_AFTER_MS = 20_000;

/**
 * Due: waiting texts whose turn it is, texts to be looked for, and texts left behind by a dead worker. `now` is the
 * injected clock's, so that holding and release can be tested at any hour.
 */
const DUE = `
  select m.shop_id as "shopId", m.id from messages m
  join shops s on s.id = m.shop_id and s.suspended_at is null
  join shop_settings o on o.shop_id = m.shop_id and o.sending
  where m.status in ('pending', 'sending', 'unknown')
    and (m.queued_at is null or m.queued_at < $2)
    and (m.not_before <= $1 or m.status = 'sending' and not exists (
      select 1 from worker_heartbeats where worker_id = m.claimed_by and not (${IS_DEAD})))
    and (m.status <> 'pending' or m.kind <> 'notices' or not exists (
      select 1 from messages e where e.shop_id = m.shop_id and e.person_id = m.person_id
        and e.visit_id = m.visit_id and e.channel = m.channel
        and e.status in ('pending', 'sending', 'unknown') and (e.created_at, e.id) < (m.created_at, m.id)))
  order by m.not_before limit ${BATCH}`;

/** Queues what is due. @returns how many tasks were put in */
export async function sweepDue(services: Pick<Services, 'clock'>, owner: Pool): Promise<number> {
  const now = services.clock.now();
  const lostBefore = new Date(now.getTime() - REQUEUE_AFTER_MS);
  const { rows: due } = await owner.query<{ shopId: string; id: string }>(DUE, [now, lostBefore]);
  const byShop = new Map<string, string[]>();
  for (const { shopId, id } of due) byShop.set(shopId, [...(byShop.get(shopId) ?? []), id]);
  let queued = 0;
  for (const [shopId, ids] of byShop) {
    queued += await withShop(shopId, () => queueOnce(ids, now, lostBefore));
  }
  return queued;
}

/** Two workers sweep at once: the row decides which of them puts the task in. */
async function queueOnce(ids: string[], now: Date, lostBefore: Date): Promise<number> {
  const taken = await run<{ id: string }>(
    `update messages set queued_at = $2
     where id in (
       select id from messages where id = any($1::uuid[]) and (queued_at is null or queued_at < $3)
       order by id for update skip locked)
     returning id`,
    [ids, now, lostBefore],
  );
  await enqueueMessages(taken.map(({ id }) => id));
  return taken.length;
}
