import { hashToken, linkToken, newId } from './ids';
import { run } from './db';
import type { Ctx } from './context';
import { Link } from '#server/models/index';

interface NewLink {
  visitId: string;
  personId: string | null;
  purpose: Link['purpose'];
}

/** Makes one person's link to the stub of a visit. @returns its path, `/t/…` */
export async function createStubLink(
  ctx: Pick<Ctx, 'shopId' | 'now' | 'env'>,
  input: NewLink,
): Promise<string> {
  const id = newId();
  const token = linkToken(ctx.env.LINK_KEY, id);
  const tokenHash = hashToken(token);
  await Link.create({ shopId: ctx.shopId, id, tokenHash, createdAt: ctx.now, ...input });
  await run('insert into link_directory (token_hash, shop_id) values ($1, $2)', [tokenHash, ctx.shopId]);
  return `/t/${token}`;
}
