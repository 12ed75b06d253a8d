import { hashToken, linkToken, newId } from './ids';
import { run } from './db';
import type { Ctx } from './context';
import { Link } from '#server/models/index';

interface NewLink {
  visitId: string;
  personId: string | null;
  purpose: Link['purpose'];
}

/** Where a link leads: its path, `/t/…`. Made again whenever it is needed, so that it need not be kept. */
export function stubPathOf({ LINK_KEY }: Pick<Ctx['env'], 'LINK_KEY'>, linkId: string): string {
  return `/t/${linkToken(LINK_KEY, linkId)}`;
}

/** Makes one person's link to the stub of a visit, under an id of its own or a given one. @returns its id */
export async function createStubLink(
  ctx: Pick<Ctx, 'shopId' | 'now' | 'env'>,
  input: NewLink,
  id = newId(),
): Promise<string> {
  const token = linkToken(ctx.env.LINK_KEY, id);
  const tokenHash = hashToken(token);
  await Link.create({ shopId: ctx.shopId, id, tokenHash, createdAt: ctx.now, ...input });
  await run('insert into link_directory (token_hash, shop_id) values ($1, $2)', [tokenHash, ctx.shopId]);
  return id;
}
