import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { db, sqlState, withShop } from '#server/lib/db';
import { newId } from '#server/lib/ids';
import {
  openShopDatabase,
  ownerRows,
  NOW,
  plainShop,
  type PlainShop,
  type ShopDatabase,
} from '../../support/shopDatabase';

let base: ShopDatabase;
let shop: PlainShop;

beforeAll(async () => {
  base = await openShopDatabase();
  shop = await plainShop(base, 'flint-street');
  await withShop(shop.id, addOneRowEach);
});
afterAll(() => base.close());

const insert = (table: string, fields: Record<string, unknown>) => {
  const all = { shop_id: shop.id, ...fields };
  const names = Object.keys(all);
  const places = names.map((_, index) => `$${index + 1}`);
  return db().query(`insert into ${table} (${names.join(', ')}) values (${places.join(', ')})`, {
    bind: Object.values(all),
  });
};

/** One row in each append-only table, written as the app. */
async function addOneRowEach(): Promise<void> {
  const [jobId] = shop.jobIds;
  const by = { person_id: shop.personId, by_name: 'Dana Ruiz', at: NOW };
  const eventId = newId();
  const halfDayId = newId();
  const [visit] = (await db().query('select visit_id from jobs'))[0] as { visit_id: string }[];
  await insert('half_days', { id: halfDayId, day: '2026-12-03', half: 'am', places: 4 });
  await insert('job_events', {
    ...{ id: eventId, job_id: jobId, seq: 1, kind: 'booked', to_stage: 'booked', visible_at: NOW },
    ...by,
  });
  await insert('visit_events', {
    id: newId(),
    visit_id: visit?.visit_id,
    kind: 'booked',
    visible_at: NOW,
    ...by,
  });
  await insert('half_day_events', {
    ...{ id: newId(), half_day_id: halfDayId, kind: 'over_raised', reason: 'asked', places: 1 },
    ...by,
  });
  await insert('signed_lines', {
    ...{ id: newId(), job_id: jobId, event_id: eventId, guard: 'approval', mode: 'met', how: 'by telephone' },
    ...by,
  });
  await insert('job_notes', { id: newId(), job_id: jobId, body: 'seen', ...by });
  await insert('audit_events', { id: newId(), kind: 'signed_in', at: NOW });
  await insert('consents', {
    ...{ id: newId(), person_id: shop.personId, phone: '+13035550118', kind: 'given', at: NOW },
    ...{ wording: '1', language: 'en', source: 'booking' },
  });
}

const tables = [
  'audit_events',
  'consents',
  'half_day_events',
  'job_events',
  'job_notes',
  'signed_lines',
  'visit_events',
];
const changes = (table: string) => [
  `update ${table} set at = at + interval '1 minute'`,
  `delete from ${table}`,
  `truncate ${table} cascade`,
];
const count = async (table: string) => (await ownerRows(base, `select id, at from ${table}`)).length;

describe.each(tables)('%s', (table) => {
  it.each(changes(table))('refuses the app: %s', async (sql) => {
    const code = await withShop(shop.id, () => db().query(sql)).catch(sqlState);
    expect(code).toBe('42501');
    expect(await count(table)).toBe(1);
  });

  it.each(changes(table))('refuses the owner: %s', async (sql) => {
    const code = await base.owner.query(sql).catch(sqlState);
    expect(code).toBe('23001');
    expect(await count(table)).toBe(1);
  });
});
