/** A database of a test file's own, opened as the server opens it, without the application on top. */
import pino from 'pino';
import { QueryTypes, Sequelize } from 'sequelize';
import { manualClock } from '#server/lib/clock';
import type { Ctx } from '#server/lib/context';
import { asRole, openDb, withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import { Account, ComplaintKind, Job, Machine, Person, Visit } from '#server/models/index';
import { createTestDatabase, type TestDatabase } from './database';

export const NOW = new Date('2026-12-03T16:00:00Z');

export interface ShopDatabase extends TestDatabase {
  app: Sequelize;
  owner: Sequelize;
  close(): Promise<void>;
}

/** Opens the app's pool, and a connection of the owner, who sees all shops. */
export async function openShopDatabase({ pool = 10 } = {}): Promise<ShopDatabase> {
  const database = await createTestDatabase();
  const app = openDb({ url: database.url, role: database.appRole, pool });
  const owner = new Sequelize(asRole(database.url, database.ownerRole), {
    dialect: 'postgres',
    logging: false,
    pool: { max: 2 },
  });
  const close = async () => {
    await Promise.all([app.close(), owner.close()]);
    await database.drop();
  };
  return { ...database, app, owner, close };
}

/** All rows of a statement run as the owner. */
export function ownerRows<T extends object>({ owner }: ShopDatabase, sql: string, bind: unknown[] = []) {
  return owner.query<T>(sql, { bind, type: QueryTypes.SELECT });
}

export interface PlainShop {
  id: string;
  accountId: string;
  personId: string;
  jobIds: string[];
}

/** A shop with one account, one person and `jobs` visits of one machine each. */
export async function plainShop({ owner }: ShopDatabase, slug: string, jobs = 1): Promise<PlainShop> {
  const id = newId();
  const bind = [id, slug, slug, 'America/Denver'];
  await owner.query('insert into shops (id, slug, name, zone) values ($1, $2, $3, $4)', { bind });
  return withShop(id, () => fill(id, jobs));
}

async function fill(shopId: string, jobs: number): Promise<PlainShop> {
  const base = () => ({ shopId, id: newId(), createdAt: NOW });
  const account = await Account.create({ ...base(), name: 'High Course Roofing' });
  const accountId = account.id;
  const person = await Person.create({ ...base(), accountId, name: 'Dana Ruiz', roles: ['manager'] });
  const kind = await ComplaintKind.create({
    ...base(),
    key: 'no_air',
    labelEn: 'No air',
    labelEs: 'Sin aire',
  });
  const jobIds: string[] = [];
  for (let at = 0; at < jobs; at += 1) {
    const machine = await Machine.create({ ...base(), accountId, kind: 'pump' });
    const visit = await Visit.create({
      ...{ ...base(), accountId, bookedByPersonId: person.id, inbound: 'drop_off' as const, arrivesAt: NOW },
      stubCode: `S${at}`,
    });
    const owned = { ownerAccountId: accountId, billedAccountId: accountId, complaintKindId: kind.id };
    const facts = { visitId: visit.id, machineId: machine.id, stage: 'booked' as const, stageSince: NOW };
    jobIds.push((await Job.create({ ...base(), ...owned, ...facts })).id);
  }
  return { id: shopId, accountId, personId: person.id, jobIds };
}

/** What a command is given when that shop's person acts. Commands under test here read no environment. */
export function ctxOf(shop: PlainShop): Ctx {
  const { id: shopId, personId, accountId } = shop;
  return {
    env: {} as Ctx['env'],
    clock: manualClock(NOW),
    log: pino({ level: 'silent' }),
    shopId,
    actor: { shopId, personId, name: 'Dana Ruiz', roles: ['manager'], accountId, crewId: null },
    ip: '192.0.2.1',
    now: NOW,
  };
}
