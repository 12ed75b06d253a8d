/** Ending e-mails from the link in them: without signing in, by one click of a mail program or on our page. */
import { createHmac, timingSafeEqual } from 'node:crypto';
import { AppError } from '#server/errors';
import type { Env } from '#server/env';
import { audit } from '#server/lib/audit';
import type { Services } from '#server/lib/context';
import { withShop } from '#server/lib/db';
import { Person, Shop } from '#server/models/index';

const ID_BYTES = 16;
const MAC_BYTES = 16;

type Keys = Pick<Env, 'LINK_KEY'>;

/** What the page shows. */
export interface UnsubscribeView {
  shopName: string;
  email: string;
  /** Whether they have ended already. */
  already: boolean;
}

/** The token holds shop and person and a mark that only the key's holder can make, so it needs no row of its own. */
export function unsubscribeToken(env: Keys, shopId: string, personId: string): string {
  const ids = Buffer.concat([idBytes(shopId), idBytes(personId)]);
  return Buffer.concat([ids, mac(env, ids)]).toString('base64url');
}

/** @returns whose e-mails the token speaks of, or null where we did not make it */
function readUnsubscribeToken(env: Keys, token: string): { shopId: string; personId: string } | null {
  const bytes = Buffer.from(token, 'base64url');
  if (bytes.length !== 2 * ID_BYTES + MAC_BYTES || bytes.toString('base64url') !== token) return null;
  const ids = bytes.subarray(0, 2 * ID_BYTES);
  if (!timingSafeEqual(bytes.subarray(2 * ID_BYTES), mac(env, ids))) return null;
  return { shopId: idText(ids.subarray(0, ID_BYTES)), personId: idText(ids.subarray(ID_BYTES)) };
}

/**
 * What the page shows before anything is ended: opening a link changes nothing.
 * @throws AppError not_found
 */
export function viewUnsubscribe(services: Services, token: string): Promise<UnsubscribeView> {
  return withReader(services, token, (person, shop) => Promise.resolve(present(person, shop)));
}

/**
 * Ends a person's e-mails. Doing it twice changes nothing.
 * @throws AppError not_found
 */
export function unsubscribe(services: Services, token: string): Promise<UnsubscribeView> {
  return withReader(services, token, async (person, shop) => {
    const before = present(person, shop);
    if (before.already) return before;
    const at = services.clock.now();
    await person.update({ emailStoppedAt: at });
    await audit({ shopId: shop.id, now: at, ip: '' }, 'emails_stopped', { personId: person.id });
    return { ...before, already: true };
  });
}

async function withReader<T>(
  { env }: Pick<Services, 'env'>,
  token: string,
  act: (person: Person, shop: Shop) => Promise<T>,
): Promise<T> {
  const found = readUnsubscribeToken(env, token);
  if (!found) throw new AppError('not_found');
  return withShop(found.shopId, async () => {
    const shop = await Shop.findByPk(found.shopId);
    const person = await Person.findByPk(found.personId, { lock: true });
    if (!shop || !person?.email) throw new AppError('not_found');
    return act(person, shop);
  });
}

function present(person: Person, shop: Shop): UnsubscribeView {
  return { shopName: shop.name, email: person.email ?? '', already: person.emailStoppedAt !== null };
}

function mac(env: Keys, ids: Buffer): Buffer {
  const key = Buffer.from(env.LINK_KEY, 'hex');
  return createHmac('sha256', key).update('unsubscribe').update(ids).digest().subarray(0, MAC_BYTES);
}

function idBytes(id: string): Buffer {
  return Buffer.from(id.replaceAll('-', ''), 'hex');
}

function idText(bytes: Buffer): string {
  return bytes.toString('hex').replace(/^(.{8})(.{4})(.{4})(.{4})/, '$1-$2-$3-$4-');
}
