import { audit } from '#server/lib/audit';
import type { Ctx } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { actorOf } from '#server/lib/passport';
import { fitsPassword } from '#server/lib/passwords';
import { forgiveSignIn, limitSignIn } from '#server/lib/rateLimits';
import { Person } from '#server/models/index';
import type { Actor } from '#shared/domain/roles';
import type { PasswordSignInBody } from '#shared/schemas/session';

/**
 * Signs one of the shop's own people in.
 * @returns null when address and password do not fit; which of the two is not told, in words or in time
 * @throws AppError too_many
 */
export async function signInByPassword(ctx: Ctx, body: PasswordSignInBody): Promise<Actor | null> {
  await limitSignIn(ctx, body.email);
  const person = await withShop(ctx.shopId, () => staffByEmail(body.email));
  const isRight = await fitsPassword(body.password, person?.passwordHash);
  if (!isRight || !person) return refuse(ctx, person);
  await forgiveSignIn(ctx, body.email);
  await withShop(ctx.shopId, () =>
    audit(ctx, 'signed_in', { personId: person.id, details: { by: 'password' } }),
  );
  return actorOf(person);
}

const staffByEmail = (email: string): Promise<Person | null> =>
  Person.findOne({ where: { email, accountId: null, leftAt: null } });

async function refuse(ctx: Ctx, person: Person | null): Promise<null> {
  await withShop(ctx.shopId, () => audit(ctx, 'sign_in_failed', { personId: person?.id ?? null }));
  return null;
}
