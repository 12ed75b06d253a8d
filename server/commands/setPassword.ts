import { AppError, fieldError } from '#server/errors';
import { audit } from '#server/lib/audit';
import { isCommonPassword } from '#server/lib/commonPasswords';
import type { Ctx } from '#server/lib/context';
import { run, withShop } from '#server/lib/db';
import { hashToken } from '#server/lib/ids';
import { hashPassword } from '#server/lib/passwords';
import { endSessionsOf } from '#server/lib/sessionStore';
import type { ShopProfile } from '#server/lib/shops';
import { PasswordLink, Person } from '#server/models/index';

/** A password link that still works, with its person. */
export interface OpenPasswordLink {
  shop: ShopProfile;
  link: PasswordLink;
  person: Person;
}

/**
 * The link of a token.
 * @throws AppError not_found; link_ended when it has been used, is too old, or its person has left
 */
export async function loadPasswordLink(
  ctx: Ctx,
  shop: ShopProfile,
  token: string,
): Promise<OpenPasswordLink> {
  const found = await withShop(shop.id, async () => {
    const link = await PasswordLink.findOne({ where: { tokenHash: hashToken(token) } });
    return link && { link, person: await Person.findOne({ where: { id: link.personId, leftAt: null } }) };
  });
  if (!found) throw new AppError('not_found');
  const { link, person } = found;
  if (!person || link.usedAt || link.expiresAt <= ctx.now) throw new AppError('link_ended');
  return { shop, link, person };
}

/**
 * Sets a person's password by a one-time link. Ends all sessions of the person: whoever had the old password is out.
 * @throws AppError invalid for a common password, link_ended when another request was first
 */
export async function setPassword(ctx: Ctx, open: OpenPasswordLink, password: string): Promise<void> {
  const { shop, person, link } = open;
  if (isCommonPassword(password, [shop.name, shop.slug, person.name, person.email ?? ''])) {
    throw fieldError('password', 'errors.field.password_common');
  }
  const passwordHash = await hashPassword(password);
  await withShop(shop.id, async () => {
    await useLinks(ctx, link);
    await person.update({ passwordHash });
    await audit(ctx, 'password_set', { personId: person.id });
  });
  await endSessionsOf({ shopId: shop.id, personId: person.id });
}

/** Uses this link up, and any other the person was sent before. */
async function useLinks(ctx: Ctx, link: PasswordLink): Promise<void> {
  const used = await run<{ id: string }>(
    'update password_links set used_at = $2 where person_id = $1 and used_at is null returning id',
    [link.personId, ctx.now],
  );
  if (!used.some(({ id }) => id === link.id)) throw new AppError('link_ended');
}
