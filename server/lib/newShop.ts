/** Opens a shop: its global rows as owner, since the app may only read them, and everything else as app. */
import type { Sequelize } from 'sequelize';
import { ComplaintKind, ShopSettings } from '#server/models/index';
import type { WeekHours } from '#shared/domain/hours';
import type { Stage } from '#shared/domain/stages';
import { withShop } from './db';
import { DEFAULT_COMPLAINTS } from './defaultComplaints';
import { newId } from './ids';

export interface NewShop {
  slug: string;
  name: string;
  /** At most 20 characters: every text begins with it. */
  textName: string;
  zone: string;
  phone: string;
  /** The number that texts come from and that answers go to. */
  sender: string;
  email: string;
  address: string;
  gateNote?: { en: string; es: string };
  about?: { en: string; es: string };
  placesPerHalfDay?: number;
  pegs?: Partial<Record<Stage, number>>;
  hours?: WeekHours;
}

const weekday = [{ from: '07:00', to: '17:00' }];
/** Monday to Friday, seven to five. */
export const USUAL_HOURS: WeekHours = {
  1: weekday,
  2: weekday,
  3: weekday,
  4: weekday,
  5: weekday,
  6: [],
  7: [],
};
const ARRIVAL_TIMES = ['07:30', '09:00', '11:00', '13:30', '15:30'];
const PLACES = 4;
const PEGS = { diagnosis: 2, repair: 2, test_run: 1 };

/**
 * @param owner a connection as the owner role
 * @returns the shop's id
 */
export async function openNewShop(owner: Sequelize, shop: NewShop): Promise<string> {
  const id = newId();
  await owner.transaction(async (transaction) => {
    const insert = (sql: string, bind: unknown[]) => owner.query(sql, { bind, transaction });
    await insert('insert into shops (id, slug, name, zone) values ($1, $2, $3, $4)', [
      id,
      shop.slug,
      shop.name,
      shop.zone,
    ]);
    await insert('insert into sender_numbers (phone, shop_id) values ($1, $2)', [shop.sender, id]);
  });
  await withShop(id, () => fillShop(id, shop));
  return id;
}

/** The usual times that fall into the shop's hours; where none does, each opening. */
function arrivalTimesOf(hours: WeekHours): string[] {
  const spans = Object.values(hours).flat();
  const within = ARRIVAL_TIMES.filter((time) => spans.some(({ from, to }) => from <= time && time < to));
  return within.length > 0 ? within : [...new Set(spans.map(({ from }) => from))].sort();
}

async function fillShop(shopId: string, shop: NewShop): Promise<void> {
  await ShopSettings.create({
    shopId,
    id: newId(),
    phone: shop.phone,
    email: shop.email,
    address: shop.address,
    textName: shop.textName,
    gateNoteEn: shop.gateNote?.en ?? '',
    gateNoteEs: shop.gateNote?.es ?? '',
    aboutEn: shop.about?.en ?? '',
    aboutEs: shop.about?.es ?? '',
    hours: shop.hours ?? USUAL_HOURS,
    arrivalTimes: arrivalTimesOf(shop.hours ?? USUAL_HOURS),
    placesPerHalfDay: shop.placesPerHalfDay ?? PLACES,
    pegs: shop.pegs ?? PEGS,
  });
  for (const [position, { key, en, es }] of DEFAULT_COMPLAINTS.entries()) {
    await ComplaintKind.create({ shopId, id: newId(), key, labelEn: en, labelEs: es, position });
  }
}
