import { rows } from '#server/lib/db';

/** The number that a shop texts from, and to which START is texted; null while it has none. */
export async function numberToText(shopId: string): Promise<string | null> {
  const [row] = await rows<{ phone: string }>('select phone from sender_numbers where shop_id = $1', [
    shopId,
  ]);
  return row?.phone ?? null;
}
