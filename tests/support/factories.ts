/** Shops with their people and machines, each in an area code of its own. */
import { Account, ComplaintKind, Crew, Machine, Person, ShopSettings } from '#server/models/index';
import { withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { openNewShop, type NewShop } from '#server/lib/newShop';
import { hashPassword } from '#server/lib/passwords';
import type { Role } from '#shared/domain/roles';
import { PASSWORD, type TestApp } from './testApp';

const AREA_CODES = [
  303, 720, 970, 719, 212, 312, 415, 602, 505, 801, 406, 307, 208, 503, 206, 702, 213, 214, 512, 713, 816,
  913, 402, 605, 701, 612, 414, 317, 614, 502, 615, 404, 305, 704, 804, 410, 215, 518, 617, 919,
];
let shopsMade = 0;

export type NewPerson = Partial<
  Pick<Person, 'name' | 'phone' | 'email' | 'accountId' | 'crewId' | 'language' | 'passwordHash'>
>;

/** A shop with one person of each role, an account with two crews, and machines. */
export interface TestShop {
  id: string;
  slug: string;
  name: string;
  zone: string;
  sender: string;
  settings: ShopSettings;
  complaintKinds: ComplaintKind[];
  staff: Record<'owner' | 'counter' | 'mechanic' | 'driver', Person>;
  account: Account;
  crew: Crew;
  otherCrew: Crew;
  manager: Person;
  crewLead: Person;
  bookkeeper: Person;
  /** Two of the crew, one of the other crew, one of none. */
  machines: Machine[];
  /** The next free number in the shop's area code. */
  nextPhone(): string;
}

let passwordHash: Promise<string> | undefined;
/** All test staff share one password, which is hashed once. */
const sharedHash = (): Promise<string> => (passwordHash ??= hashPassword(PASSWORD));

function areaCode(index: number): number {
  const found = AREA_CODES[index];
  if (!found) throw new Error('more shops in one test file than there are area codes in the list');
  return found;
}

function phonesOf(area: number): () => string {
  let next = 100;
  return () => `+1${area}5550${next++}`;
}

/** Makes a shop that is ready to work. */
export async function makeShop(app: TestApp, changes: Partial<NewShop> = {}): Promise<TestShop> {
  const index = shopsMade++;
  const nextPhone = phonesOf(areaCode(index));
  const given: NewShop = {
    slug: `shop-${index}`,
    name: `Test Shop ${index}`,
    textName: `Shop ${index}`,
    zone: 'America/Denver',
    phone: nextPhone(),
    sender: nextPhone(),
    email: `shop${index}@example.com`,
    address: `${index} Foundry Street`,
    ...changes,
  };
  const id = await openNewShop(app.owner, given);
  const hash = await sharedHash();
  return withShop(id, () => furnish(app, { ...given, id, nextPhone, hash }));
}

type Opened = NewShop & { id: string; nextPhone: () => string; hash: string };

async function furnish(app: TestApp, opened: Opened): Promise<TestShop> {
  const { id, slug, name, zone, sender, nextPhone, hash } = opened;
  const createdAt = app.clock.now();
  const person = (roles: Role[], fields: NewPerson = {}) =>
    addPerson(app, id, roles, { phone: nextPhone(), ...fields });
  const staff = (role: 'owner' | 'counter' | 'mechanic' | 'driver') =>
    person([role], { name: `${role} of ${slug}`, email: `${role}@${slug}.example.com`, passwordHash: hash });
  const account = await Account.create({ shopId: id, id: newId(), name: `${name} Roofing`, createdAt });
  const crew = await Crew.create({ shopId: id, id: newId(), accountId: account.id, name: 'North crew' });
  const otherCrew = await Crew.create({ shopId: id, id: newId(), accountId: account.id, name: 'South crew' });
  const customer = (role: Role, fields: NewPerson = {}) =>
    person([role], {
      name: `${role} of ${slug}`,
      email: `${role.replace('_', '-')}@${slug}.example.com`,
      accountId: account.id,
      ...fields,
    });
  const machines: Machine[] = [];
  for (const [at, crewId] of [crew.id, crew.id, otherCrew.id, null].entries()) {
    machines.push(await addMachine(app, id, { accountId: account.id, crewId, fleetNumber: String(at + 1) }));
  }
  return {
    id,
    slug,
    name,
    zone,
    sender,
    nextPhone,
    account,
    crew,
    otherCrew,
    machines,
    settings: await ShopSettings.findOne({ rejectOnEmpty: true }),
    complaintKinds: await ComplaintKind.findAll({ order: ['position'] }),
    staff: {
      owner: await staff('owner'),
      counter: await staff('counter'),
      mechanic: await staff('mechanic'),
      driver: await staff('driver'),
    },
    manager: await customer('manager'),
    crewLead: await customer('crew_lead', { crewId: crew.id }),
    bookkeeper: await customer('bookkeeper'),
  };
}

/** Adds a person to a shop, inside a unit of work. */
export function addPerson(
  app: TestApp,
  shopId: string,
  roles: Role[],
  fields: NewPerson = {},
): Promise<Person> {
  return Person.create({
    shopId,
    id: newId(),
    name: 'Somebody',
    roles,
    createdAt: app.clock.now(),
    ...fields,
  });
}

/** Adds a machine to an account, inside a unit of work. */
export function addMachine(
  app: TestApp,
  shopId: string,
  fields: Pick<Machine, 'accountId'> & Partial<Pick<Machine, 'crewId' | 'fleetNumber' | 'kind'>>,
): Promise<Machine> {
  return Machine.create({
    shopId,
    id: newId(),
    kind: 'wheelbarrow_compressor',
    maker: 'Tarrow',
    model: 'W4',
    createdAt: app.clock.now(),
    ...fields,
  });
}

/** Suspends a shop, or lets it open again. */
export async function suspend(app: TestApp, shopId: string, at: Date | null): Promise<void> {
  await app.owner.query('update shops set suspended_at = $2 where id = $1', { bind: [shopId, at] });
}
