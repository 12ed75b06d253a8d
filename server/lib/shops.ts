import { AppError } from '#server/errors';
import { withShop } from './db';
import { Shop, ShopSettings } from '#server/models/index';

/** A shop with its settings. */
export interface ShopProfile {
  id: string;
  slug: string;
  name: string;
  zone: string;
  settings: ShopSettings;
}

/** The settings of the shop of the present unit of work. */
export async function settingsOf(shopId: string): Promise<ShopSettings> {
  const settings = await ShopSettings.findOne({ where: { shopId } });
  if (!settings) throw new Error(`shop ${shopId} has no settings`);
  return settings;
}

/**
 * The shop that an address names.
 * @throws AppError not_found, also for a suspended shop
 */
export async function shopBySlug(slug: string): Promise<ShopProfile> {
  const shop = /^[a-z0-9-]{1,64}$/.test(slug)
    ? await Shop.findOne({ where: { slug, suspendedAt: null } })
    : null;
  if (!shop) throw new AppError('not_found');
  return withShop(shop.id, () => profileOf(shop));
}

/** The shop of the present unit of work, with its settings. */
export async function unitShopOf(shopId: string): Promise<ShopProfile> {
  const shop = await Shop.findByPk(shopId);
  if (!shop) throw new AppError('not_found');
  return profileOf(shop);
}

async function profileOf(shop: Shop): Promise<ShopProfile> {
  const { id, slug, name, zone } = shop;
  return { id, slug, name, zone, settings: await settingsOf(id) };
}
