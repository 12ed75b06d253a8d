import { audit } from '#server/lib/audit';
import type { Ctx } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { endSessionsOf } from '#server/lib/sessionStore';
import type { Actor } from '#shared/domain/roles';

/** Ends every session of a person, this one included. */
export async function signOutEverywhere(ctx: Ctx, { shopId, personId }: Actor): Promise<void> {
  await endSessionsOf({ shopId, personId });
  await withShop(shopId, () => audit(ctx, 'signed_out_everywhere', { personId }));
}
