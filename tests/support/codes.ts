/** One-time codes as a visitor asks for them and reads them on the phone. */
import { withShop } from '#server/lib/db';
import { Message } from '#server/models/index';
import type { TestShop } from './factories';
import { visitor, type TestApp } from './testApp';

interface Asked {
  phone: string | null;
  purpose?: 'book' | 'sign_in';
  address?: string;
}

/** Asks for a code, from an address of its own unless one is given. */
export function askCode(
  app: Pick<TestApp, 'express'>,
  shop: TestShop,
  { phone, purpose = 'sign_in', address }: Asked,
) {
  return visitor(app, address).post(`/api/shops/${shop.slug}/codes`).send({ phone, purpose, language: 'en' });
}

/** The texts with codes that the shop has sent. */
export const codeTexts = (shop: TestShop): Promise<Message[]> =>
  withShop(shop.id, () => Message.findAll({ where: { kind: 'code' }, order: ['createdAt'] }));

/** The digits of the newest text, as the person reads them. */
async function readCode(shop: TestShop, phone: string | null): Promise<string> {
  const texts = (await codeTexts(shop)).filter((text) => text.toAddress === phone);
  return /\b\d{6}\b/.exec(texts.at(-1)?.body ?? '')?.[0] ?? '';
}

/** Asks for a code and reads it. */
export async function askedCode(
  app: Pick<TestApp, 'express'>,
  shop: TestShop,
  given: Asked,
): Promise<{ requestId: string; code: string }> {
  const answer = await askCode(app, shop, given).expect(200);
  const { requestId } = answer.body as { requestId: string };
  return { requestId, code: await readCode(shop, given.phone) };
}
