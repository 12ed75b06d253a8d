/**
 * Idempotency keys: a client whose server died repeats its request with the same key and gets the first answer.
 * The key's row is written in the act's own transaction, so an act that failed leaves no key behind.
 */
import { createHash } from 'node:crypto';
import { AppError } from '#server/errors';
import { rows, run } from './db';
import { newId } from './ids';
import type { Ctx } from './context';

interface KeyRow {
  body_hash: string;
  answer: unknown;
}

/** The part of a request that must be equal for a key to mean the same act. */
export interface KeyedRequest {
  key: string;
  /** The act, with what it is about: 'move 7K4QM2'. */
  act: string;
  body: unknown;
}

/**
 * Runs an act once per key, inside a unit of work. A second request with the key waits for the first to commit and
 * is given its answer.
 * @throws AppError key_reused when the key was used for another act, person or body
 */
export async function once<T>(ctx: Ctx, request: KeyedRequest, act: () => Promise<T>): Promise<T> {
  const hash = hashOf(ctx, request);
  const taken = await run<{ id: string }>(
    `insert into idempotency_keys (shop_id, id, key, body_hash, created_at) values ($1, $2, $3, $4, $5)
     on conflict (shop_id, key) do nothing returning id`,
    [ctx.shopId, newId(), request.key, hash, ctx.now],
  );
  if (taken.length === 0) return replay<T>(request.key, hash);
  const answer = await act();
  const kept = [taken[0]?.id, JSON.stringify(answer)];
  await run('update idempotency_keys set answer = $2 where id = $1', kept);
  return answer;
}

/** What an earlier request with this key was answered, or null when there was none. Inside a unit of work. */
export async function answered<T>(ctx: Ctx, request: KeyedRequest): Promise<T | null> {
  const found = await rows('select 1 from idempotency_keys where key = $1', [request.key]);
  return found.length > 0 ? replay<T>(request.key, hashOf(ctx, request)) : null;
}

function hashOf(ctx: Ctx, { act, body }: KeyedRequest): string {
  const meaning = JSON.stringify([act, ctx.actor?.personId ?? null, body]);
  return createHash('sha256').update(meaning).digest('hex');
}

async function replay<T>(key: string, hash: string): Promise<T> {
  const [found] = await rows<KeyRow>('select body_hash, answer from idempotency_keys where key = $1', [key]);
  if (found?.body_hash !== hash) throw new AppError('key_reused');
  return found.answer as T;
}
