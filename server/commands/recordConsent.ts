import type { Ctx } from '#server/lib/context';
import { newId } from '#server/lib/ids';
import type { ShopProfile } from '#server/lib/shops';
import { translate } from '#server/lib/translate';
import { Consent, type Person } from '#server/models/index';
import type { Language } from '#shared/domain/when';

/** Records that a person agreed to texts, in the very words that stood beside the box. */
export async function recordConsent(
  ctx: Ctx,
  shop: Pick<ShopProfile, 'name'>,
  person: Person,
  language: Language,
  source: string,
): Promise<void> {
  if (!person.phone) return;
  await Consent.create({
    shopId: ctx.shopId,
    id: newId(),
    personId: person.id,
    phone: person.phone,
    kind: 'given',
    wording: translate(language, 'book.consent', { shop: shop.name }),
    language,
    source,
    ip: ctx.ip,
    at: ctx.now,
  });
}
