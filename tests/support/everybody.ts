/** Two shops with everybody who could ask for something, each in a browser of his own. */
import { withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { Account, type Person } from '#server/models/index';
import type { Role } from '#shared/domain/roles';
import { addMachine, addPerson, makeShop, type NewPerson, type TestShop } from './factories';
import { signedIn, visitor, type Client, type TestApp } from './testApp';

/** Who signs in, in either shop. */
export const MEMBERS = [
  'crewLead',
  'otherCrewLead',
  'manager',
  'otherManager',
  'bookkeeper',
  'counter',
  'mechanic',
  'driver',
  'owner',
] as const;
export type Member = (typeof MEMBERS)[number];
/** Who has no session, or one that ended when he left. */
export const STRANGERS = ['anonymous', 'linkHolder', 'guest', 'formerOwner', 'formerManager'] as const;
export type Stranger = (typeof STRANGERS)[number];

export interface House {
  shop: TestShop;
  people: Record<Member, Person>;
  clients: Record<Member, Client>;
}

export interface Everybody {
  own: House;
  other: House;
  strangers: Record<Stranger, Client>;
}

/** Opens a shop with all members signed in. */
async function openHouse(app: TestApp, name: string, slug: string): Promise<House> {
  const shop = await makeShop(app, { name, slug, textName: name.slice(0, 20), placesPerHalfDay: 200 });
  const people = { ...shop.staff, ...(await customersOf(app, shop, name)) };
  const clients: Partial<Record<Member, Client>> = {};
  for (const member of MEMBERS) clients[member] = await signedIn(app, shop, people[member]);
  return { shop, people, clients: clients as Record<Member, Client> };
}

async function customersOf(app: TestApp, shop: TestShop, name: string) {
  const { id, account, otherCrew, manager, crewLead, bookkeeper } = shop;
  return withShop(id, async () => {
    const createdAt = app.clock.now();
    const other = await Account.create({ shopId: id, id: newId(), name: `${name} Masonry`, createdAt });
    await addMachine(app, id, { accountId: other.id, fleetNumber: 'M1' });
    const add = (role: Role, fields: NewPerson) =>
      addPerson(app, id, [role], {
        name: `second ${role} of ${shop.slug}`,
        phone: shop.nextPhone(),
        ...fields,
      });
    return {
      manager,
      crewLead,
      bookkeeper,
      otherCrewLead: await add('crew_lead', { accountId: account.id, crewId: otherCrew.id }),
      otherManager: await add('manager', { accountId: other.id }),
    };
  });
}

/** Two shops, and strangers to both; who was a member has left after signing in. */
export async function gatherEverybody(app: TestApp): Promise<Everybody> {
  const own = await openHouse(app, 'Quarrel Lane Repair', 'quarrel-lane');
  const other = await openHouse(app, 'Vesper Yard Repair', 'vesper-yard');
  const strangers = {
    anonymous: visitor(app),
    linkHolder: visitor(app),
    guest: visitor(app),
    formerOwner: await former(app, own.shop, 'owner'),
    formerManager: await former(app, own.shop, 'manager'),
  };
  return { own, other, strangers };
}

async function former(app: TestApp, shop: TestShop, role: 'owner' | 'manager'): Promise<Client> {
  const like = role === 'owner' ? shop.staff.owner : shop.manager;
  const { accountId, passwordHash } = like;
  const email = `former-${role}@${shop.slug}.example.com`;
  const fields = { name: `former ${role}`, email, phone: shop.nextPhone(), accountId, passwordHash };
  const person = await withShop(shop.id, () => addPerson(app, shop.id, [role], fields));
  const client = await signedIn(app, shop, person);
  await withShop(shop.id, () => person.update({ leftAt: app.clock.now() }));
  return client;
}
