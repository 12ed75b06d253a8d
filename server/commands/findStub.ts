import { AppError } from '#server/errors';
import type { Ctx } from '#server/lib/context';
import { rows, withShop } from '#server/lib/db';
import { createStubLink, stubPathOf } from '#server/lib/links';
import type { ShopProfile } from '#server/lib/shops';
import { isCode, normalizeCode } from '#shared/domain/tagCode';
import type { FindStubBody } from '#shared/schemas/booking';

/**
 * Finds a visit by its stub code and the last four digits of a phone of it: the booker's, or that of whoever brought a
 * machine. A wrong code and wrong digits are answered alike.
 * @returns the path of a fresh link
 */
export async function findStub(ctx: Ctx, shop: ShopProfile, body: FindStubBody): Promise<string> {
  const code = normalizeCode(body.code);
  return withShop(shop.id, async () => {
    const [found] = await rows<{ visit_id: string; person_id: string }>(
      `select v.id as visit_id, p.id as person_id
       from visits v
       join people p on p.shop_id = v.shop_id and right(p.phone, 4) = $2 and (
         p.id = v.booked_by_person_id
         or exists (select 1 from jobs j where j.shop_id = v.shop_id and j.visit_id = v.id and j.brought_by_person_id = p.id)
       )
       where v.stub_code = $1 and p.left_at is null
       order by p.id limit 1`,
      [isCode(code) ? code : '', body.lastFour],
    );
    if (!found) throw new AppError('not_found');
    const linkId = await createStubLink(
      { ...ctx, shopId: shop.id },
      { visitId: found.visit_id, personId: found.person_id, purpose: 'found' },
    );
    return stubPathOf(ctx.env, linkId);
  });
}
