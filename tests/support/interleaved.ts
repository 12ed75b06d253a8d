/**
 * Many units of many shops at once, none of whose queries names a shop: whatever keeps shops apart has to do it
 * beneath them.
 */
import { setImmediate as breathe } from 'node:timers/promises';
import { Account, Job, Machine, Person, Visit } from '#server/models/index';
import type { PlainShop } from './shopDatabase';

/** Units in flight; more than the pool has connections, so that each is handed from shop to shop. */
const LANES = 40;
const THROWN = 'thrown on purpose';

type Rows = { shopId: string }[];
export interface Load {
  shops: PlainShop[];
  units: number;
  /** How a unit of a shop is run. */
  unit: (shopId: string, act: () => Promise<void>) => Promise<void>;
}
export interface LoadResult {
  done: number;
  thrown: number;
  rowsRead: number;
  /** Rows, counts and updates that were not the unit's own shop's alone. */
  foreign: string[];
}

const withoutShop = [
  async (): Promise<Rows> => Machine.findAll(),
  async (): Promise<Rows> => {
    const jobs = await Job.findAll({ include: ['visit', 'machine'] });
    return jobs.flatMap((job) => {
      const { visit, machine } = job as Job & { visit: Visit; machine: Machine };
      return [job, visit, machine];
    });
  },
  async (): Promise<Rows> => {
    const visits = await Visit.findAll({ include: 'jobs', limit: 2, order: ['stubCode'] });
    return visits.flatMap((visit) => [visit, ...(visit as Visit & { jobs: Job[] }).jobs]);
  },
  async (): Promise<Rows> => {
    const newest = await Job.findOne({ include: 'machine', order: [['createdAt', 'DESC']] });
    return newest ? [newest, (newest as Job & { machine: Machine }).machine] : [];
  },
  async (): Promise<Rows> => (await Person.findAndCountAll({ limit: 1 })).rows,
];

/** Runs the load and says what was seen that should not have been. */
export async function runInterleaved({ shops, units, unit }: Load): Promise<LoadResult> {
  const result: LoadResult = { done: 0, thrown: 0, rowsRead: 0, foreign: [] };
  let next = 0;
  const lane = async () => {
    while (next < units) {
      const turn = next++;
      const shop = shops[(turn * 7) % shops.length];
      if (shop) await oneUnit(shop, turn, unit, result);
    }
  };
  await Promise.all(Array.from({ length: LANES }, lane));
  return result;
}

async function oneUnit(shop: PlainShop, turn: number, unit: Load['unit'], result: LoadResult): Promise<void> {
  try {
    await unit(shop.id, () => work(shop, turn, result));
    result.done += 1;
  } catch (error) {
    if (!(error instanceof Error && error.message === THROWN)) throw error;
    result.thrown += 1;
  }
}

async function work(shop: PlainShop, turn: number, result: LoadResult): Promise<void> {
  const note = (what: string, isForeign: boolean) => isForeign && result.foreign.push(`${turn}: ${what}`);
  for (const [index, read] of withoutShop.entries()) {
    const found = await read();
    result.rowsRead += found.length;
    note(
      `read ${index} gave ${found.length} rows`,
      found.length === 0 || found.some((row) => row.shopId !== shop.id),
    );
    await breathe();
  }
  note('count', (await Job.count()) !== shop.jobIds.length);
  const isThrown = turn % 20 === 0;
  const [renamed] = await Account.update({ name: isThrown ? THROWN : `of ${shop.id}` }, { where: {} });
  note(`update of ${renamed}`, renamed !== 1);
  if (isThrown) throw new Error(THROWN);
}
