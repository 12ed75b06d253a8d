import type { Ctx } from './context';
import { newId } from './ids';
import { AuditEvent } from '#server/models/index';

/** Adds to the shop's record of sign-ins, refusals and alarms. Inside a unit of work. */
export async function audit(
  ctx: Pick<Ctx, 'shopId' | 'now' | 'ip'>,
  kind: string,
  facts: { personId?: string | null; details?: Record<string, unknown> } = {},
): Promise<void> {
  await AuditEvent.create({
    shopId: ctx.shopId,
    id: newId(),
    kind,
    at: ctx.now,
    personId: facts.personId ?? null,
    ip: ctx.ip,
    details: facts.details ?? {},
  });
}
