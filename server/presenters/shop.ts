import type { Ctx } from '#server/lib/context';
import type { ShopProfile } from '#server/lib/shops';
import { Closure, ComplaintKind } from '#server/models/index';
import { MACHINE_KINDS } from '#shared/domain/machineKinds';
import type { ShopView } from '#shared/schemas/shop';

/** Version of the words that people agree to when they ask for texts; a change of them gets a new one. */
const CONSENT_VERSION = '2026-12';

/** What anybody may read of a shop. Inside a unit of work. */
export async function presentShop(ctx: Pick<Ctx, 'now'>, shop: ShopProfile): Promise<ShopView> {
  const { slug, name, zone, settings } = shop;
  const closures = await Closure.findAll({ order: ['fromDate'] });
  return {
    now: ctx.now.toISOString(),
    slug,
    name,
    zone,
    phone: settings.phone,
    email: settings.email,
    address: settings.address,
    gateNote: { en: settings.gateNoteEn, es: settings.gateNoteEs },
    about: { en: settings.aboutEn, es: settings.aboutEs },
    hours: settings.hours,
    closures: closures.map(({ fromDate, toDate }) => ({ from: fromDate, to: toDate })),
    complaintKinds: await presentComplaintKinds(),
    machineKinds: MACHINE_KINDS,
    consent: { version: CONSENT_VERSION },
  };
}

async function presentComplaintKinds(): Promise<ShopView['complaintKinds']> {
  const kinds = await ComplaintKind.findAll({ where: { active: true }, order: ['position', 'key'] });
  return kinds.map(({ id, key, labelEn, labelEs }) => ({ id, key, label: { en: labelEn, es: labelEs } }));
}
