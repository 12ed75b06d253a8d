import type { Ctx, Services } from '#server/lib/context';

/** What a task or a webhook acts with: nobody is signed in, the act begins now. */
export function taskCtx(services: Services, shopId: string): Ctx {
  const { env, clock, log } = services;
  return { env, clock, log, shopId, actor: null, ip: '', now: clock.now() };
}
