import type { Ctx } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { unitShopOf } from '#server/lib/shops';
import { reachOfOne } from '#server/messages/recipients';
import { Account, Person } from '#server/models/index';
import { abilitiesOf } from '#shared/policies/abilities';
import type { Actor } from '#shared/domain/roles';
import type { SessionView } from '#shared/schemas/session';

/** What the client may know of who is signed in; nobody, for a visitor. */
export async function presentSession(ctx: Pick<Ctx, 'now'>, actor: Actor | null): Promise<SessionView> {
  const person = actor && (await withShop(actor.shopId, () => presentPerson(actor)));
  return { now: ctx.now.toISOString(), person };
}

async function presentPerson(actor: Actor): Promise<SessionView['person']> {
  const person = await Person.findByPk(actor.personId);
  if (!person) return null;
  const account = person.accountId === null ? null : await Account.findByPk(person.accountId);
  const { slug, name, zone, settings } = await unitShopOf(actor.shopId);
  return {
    id: person.id,
    name: person.name,
    roles: person.roles,
    language: person.language,
    phone: person.phone,
    email: person.email,
    textsOn: account !== null && (await reachOfOne(person)).texts === 'on',
    account: account && { id: account.id, name: account.name },
    shop: { slug, name, zone, phone: settings.phone },
    abilities: abilitiesOf(actor),
  };
}
